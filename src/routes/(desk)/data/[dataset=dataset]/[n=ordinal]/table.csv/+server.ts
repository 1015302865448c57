import { part } from '$lib/domain/references';
import { csvOf } from '$lib/server/lineage/csv-export';
import { vintageView } from '$lib/server/lineage/vintage-view';
import { serve } from '$lib/server/http/serve';
import type { RequestHandler } from './$types';

/** The figures of a vintage as they were read: what its runs compute with. */
export const GET: RequestHandler = (event) =>
	serve(event, (ctx, actor) => {
		const { table } = vintageView(ctx, actor, part(event.params.dataset, Number(event.params.n)));
		const rows = table.periods.map((period, i) => [
			period,
			...table.columns.map(({ values }) => values[i] ?? null)
		]);
		const header = ['period', ...table.columns.map(({ name }) => name)];
		return new Response(csvOf(header, rows), {
			headers: {
				'content-type': 'text/csv; charset=utf-8',
				'content-disposition': `attachment; filename="${event.params.dataset}-${event.params.n}-table.csv"`
			}
		});
	});
