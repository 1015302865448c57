import { error } from '@sveltejs/kit';
import { serve } from '$lib/server/http/serve';
import { csvOf } from '$lib/server/lineage/csv-export';
import { resultOf } from '$lib/server/runs/run-view';
import { isPlot, plots, plotTable } from '$lib/ui/report/plot-table';
import type { RequestHandler } from './$types';

/** The numbers behind one plot or table of a run, at full precision. */
export const GET: RequestHandler = (event) =>
	serve(event, (ctx, actor) => {
		const { run } = event.params;
		const plot = event.url.searchParams.get('plot') ?? '';
		const result = resultOf(ctx, actor, run);
		if (!isPlot(plot)) error(400, `Ask for one of ${plots.join(', ')}: ?plot=${plots[0]}`);
		const table = plotTable(result, plot);
		if (!table) error(404, `${run} has no ${plot}.`);
		return new Response(csvOf(table.header, table.rows), {
			headers: {
				'content-type': 'text/csv; charset=utf-8',
				'content-disposition': `attachment; filename="${run}-${plot}.csv"`
			}
		});
	});
