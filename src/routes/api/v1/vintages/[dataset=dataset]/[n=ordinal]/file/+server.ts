import { part } from '$lib/domain/references';
import { api } from '$lib/server/http/api';
import { download } from '$lib/server/lineage/download';
import { vintageFile } from '$lib/server/lineage/vintage-view';
import type { RequestHandler } from './$types';

/** The exact bytes of a vintage's file. */
export const GET: RequestHandler = (event) =>
	api(
		event,
		(ctx, actor) => {
			const ref = part(event.params.dataset, Number(event.params.n));
			return download(ref, vintageFile(ctx, actor, ref));
		},
		{ scope: 'read' }
	);
