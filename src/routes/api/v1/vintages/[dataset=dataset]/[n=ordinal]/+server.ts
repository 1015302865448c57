import { part } from '$lib/domain/references';
import { api } from '$lib/server/http/api';
import { vintageView } from '$lib/server/lineage/vintage-view';
import type { RequestHandler } from './$types';

/** A vintage: lineage, findings and what moved since the one before; `?figures=1` adds the figures. */
export const GET: RequestHandler = (event) =>
	api(
		event,
		(ctx, actor) => {
			const { vintage, table, last, ...view } = vintageView(
				ctx,
				actor,
				part(event.params.dataset, Number(event.params.n))
			);
			const { periods, columns } = table;
			return {
				...vintage,
				...view,
				latest: part(vintage.dataset, last),
				...(event.url.searchParams.get('figures') === '1' && { figures: { periods, columns } })
			};
		},
		{ scope: 'read' }
	);
