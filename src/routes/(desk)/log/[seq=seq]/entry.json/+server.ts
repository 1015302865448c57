import { download } from '$lib/server/exports/download';
import { entryView } from '$lib/server/exports/log-view';
import { serve } from '$lib/server/http/serve';
import type { RequestHandler } from './$types';

/** The exact bytes of an entry, as its leaf hash is over them. */
export const GET: RequestHandler = (event) =>
	serve(event, (ctx, actor) => {
		const { seq, text } = entryView(ctx, actor, Number(event.params.seq));
		return download(`E-${seq}.json`, 'application/json', text);
	});
