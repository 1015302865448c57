import { serve } from '$lib/server/http/serve';
import { datasetView } from '$lib/server/lineage/vintage-view';
import type { PageServerLoad } from './$types';

/** A dataset and its vintages. */
export const load: PageServerLoad = (event) =>
	serve(event, (ctx, actor) => {
		const { ref, name, models, vintages } = datasetView(ctx, actor, event.params.dataset);
		const people = ctx.people.names(vintages.map(({ by }) => by as 'system'));
		return {
			ref,
			name,
			models,
			vintages: vintages.map((vintage) => ({
				ref: vintage.ref,
				vintageDate: vintage.vintageDate,
				frequency: vintage.frequency,
				from: vintage.from,
				to: vintage.to,
				observations: vintage.observations,
				fileName: vintage.fileName,
				at: vintage.at,
				by: people.get(vintage.by) ?? vintage.by,
				entry: vintage.entry,
				used: vintage.columns.filter(({ role }) => role !== 'left-out').map(({ name: column }) => column)
			}))
		};
	});
