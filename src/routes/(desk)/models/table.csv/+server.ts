import { matchesFilter, modelFilterSchema } from '$lib/domain/register-filter';
import { taken } from '$lib/domain/register-input';
import { serve } from '$lib/server/http/serve';
import { csvOf } from '$lib/server/lineage/csv-export';
import { registerTable, type RegisterLine } from '$lib/server/runs/register-table';
import { compareValues } from '$lib/ui/table-state';
import type { RequestHandler } from './$types';

/** The columns of the page, in its order; the ids are those its address sorts by. */
const columns: readonly (readonly [
	id: string,
	head: string,
	value: (line: RegisterLine) => string | number | undefined
])[] = [
	['ref', 'ref', ({ ref }) => ref],
	['version', 'versions', ({ whole }) => whole?.versions],
	['name', 'model', ({ name }) => name],
	['uses', 'uses', ({ whole }) => whole?.uses.join('; ')],
	['tier', 'tier', ({ tier }) => tier],
	['tierHow', 'tier is', ({ tierHow }) => tierHow],
	['owner', 'owner', ({ whole }) => whole?.owners.join('; ')],
	['validator', 'validator', ({ whole }) => whole?.validators.join('; ')],
	['state', 'state', ({ state }) => state],
	['run', 'run', ({ latest }) => latest?.run],
	['gap', 'gap, s.d.', ({ latest }) => latest?.gap],
	['gapPeriod', 'gap of', ({ latest }) => latest?.gapPeriod],
	['query', 'query', ({ latest }) => latest?.query],
	['fails', 'fails', ({ latest }) => latest?.fails],
	['open', 'not assessable', ({ latest }) => latest?.notAssessable],
	['due', 'review due', ({ whole }) => whole?.due?.date],
	['dueReason', 'because', ({ whole }) => whole?.due?.reason]
];

const sorted = (lines: readonly RegisterLine[], sort: string): RegisterLine[] => {
	const descending = sort.startsWith('-');
	const value = columns.find(([id]) => id === sort.replace(/^-/, ''))?.[2];
	if (!value) return [...lines];
	return [...lines].sort((a, b) => {
		const [left, right] = [value(a), value(b)];
		// What is absent stands last in both directions, as on the page.
		if (left === undefined || right === undefined)
			return Number(left === undefined) - Number(right === undefined);
		return compareValues(left, right) * (descending ? -1 : 1);
	});
};

/** The rows the page shows, with its filters, search and order. */
export const GET: RequestHandler = (event) =>
	serve(event, (ctx, actor) => {
		const asked = event.url.searchParams;
		const filter = taken(modelFilterSchema, Object.fromEntries(asked));
		const find = (asked.get('find') ?? '').toLowerCase();
		const lines = registerTable(ctx, actor)
			.filter((line) => matchesFilter(line, filter))
			.filter((line) =>
				columns.some(([, , value]) =>
					String(value(line) ?? '')
						.toLowerCase()
						.includes(find)
				)
			);
		const body = csvOf(
			columns.map(([, head]) => head),
			sorted(lines, asked.get('sort') ?? 'due').map((line) =>
				columns.map(([, , value]) => value(line) ?? null)
			)
		);
		return new Response(body, {
			headers: {
				'content-type': 'text/csv; charset=utf-8',
				'content-disposition': 'attachment; filename="models.csv"'
			}
		});
	});
