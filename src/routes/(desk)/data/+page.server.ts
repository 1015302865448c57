import { serve } from '$lib/server/http/serve';
import { seriesDictionary } from '$lib/server/lineage/series';
import type { PageServerLoad } from './$types';

/** The dictionary of series that models share. */
export const load: PageServerLoad = (event) =>
	serve(event, (ctx, actor) => ({ series: seriesDictionary(ctx, actor) }));
