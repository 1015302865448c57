import { part } from '$lib/domain/references';
import { serve } from '$lib/server/http/serve';
import { glimpseOf } from '$lib/server/lineage/preview-view';
import { vintageView } from '$lib/server/lineage/vintage-view';
import { runsOnVintage } from '$lib/server/runs/run-list';
import type { PageServerLoad } from './$types';

/** Revised points shown of each column; the rest is counted. */
const shownPoints = 12;

/** A vintage: lineage, figures, findings, what moved since the one before, where it is used. */
export const load: PageServerLoad = (event) =>
	serve(event, (ctx, actor) => {
		const ref = part(event.params.dataset, Number(event.params.n));
		const { vintage, name, models, table, findings, before, changes, last } = vintageView(ctx, actor, ref);
		return {
			vintage,
			name,
			models,
			last,
			by: ctx.people.names([vintage.by as 'system']).get(vintage.by) ?? vintage.by,
			glimpse: glimpseOf(table),
			findings,
			changes,
			before: before && {
				ref: before.ref,
				vintageDate: before.vintageDate,
				columns: before.comparison.columns.map((column) => ({
					...column,
					revised: column.revised.slice(0, shownPoints),
					revisions: column.revised.length
				}))
			},
			runs: runsOnVintage(ctx, actor, ref).map(({ ref: run, version, purpose, state, requestedAt }) => ({
				run,
				version,
				purpose,
				state,
				requestedAt
			}))
		};
	});
