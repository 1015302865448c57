import { part } from '$lib/domain/references';
import { download } from '$lib/server/lineage/download';
import { vintageFile } from '$lib/server/lineage/vintage-view';
import { serve } from '$lib/server/http/serve';
import type { RequestHandler } from './$types';

/** The exact bytes of a vintage's file. */
export const GET: RequestHandler = (event) =>
	serve(event, (ctx, actor) => {
		const ref = part(event.params.dataset, Number(event.params.n));
		return download(ref, vintageFile(ctx, actor, ref));
	});
