import { download } from '$lib/server/exports/download';
import { checkpointView } from '$lib/server/exports/log-view';
import { serve } from '$lib/server/http/serve';
import type { RequestHandler } from './$types';

/** The newest signed head of the log (C2SP checkpoint). */
export const GET: RequestHandler = (event) =>
	serve(event, (ctx, actor) => {
		const { size, note } = checkpointView(ctx, actor);
		return download(`checkpoint-${size}.txt`, 'text/plain; charset=utf-8', note);
	});
