import { serve } from '$lib/server/http/serve';
import { csvOf } from '$lib/server/lineage/csv-export';
import { seriesDictionary } from '$lib/server/lineage/series';
import type { RequestHandler } from './$types';

/** The dictionary of series as CSV. */
export const GET: RequestHandler = (event) =>
	serve(event, (ctx, actor) => {
		const rows = seriesDictionary(ctx, actor).map((row) => [
			row.source,
			row.code,
			row.label,
			row.unit,
			row.seasonal,
			row.latest,
			row.vintages.join(' '),
			row.models.join(' ')
		]);
		const header = [
			'provider',
			'code',
			'name',
			'unit',
			'seasonal adjustment',
			'latest vintage date',
			'vintages',
			'models'
		];
		return new Response(csvOf(header, rows), {
			headers: {
				'content-type': 'text/csv; charset=utf-8',
				'content-disposition': 'attachment; filename="series.csv"'
			}
		});
	});
