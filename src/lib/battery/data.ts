import { Invalid, type Issue } from '$lib/domain/faults';
import { periodIndex, periodText, type Frequency } from '$lib/domain/period';
import type { Specification } from '$lib/domain/specification';

/** A parsed table: one value a period, null where it is missing. */
export interface Data {
	readonly frequency: Frequency;
	readonly periods: readonly string[];
	readonly columns: readonly { readonly name: string; readonly values: readonly (number | null)[] }[];
}

/** Columns on consecutive periods. */
export interface Grid {
	readonly periods: readonly string[];
	readonly columns: ReadonlyMap<string, readonly (number | null)[]>;
}

/** What a specification asks of data that they do not have. */
const missing = (spec: Specification, data: Data): Issue[] => {
	const names = new Set(data.columns.map(({ name }) => name));
	const lacks = (pointer: string, column: string): Issue[] =>
		names.has(column)
			? []
			: [{ pointer, message: `The data have no column ${column}; they have ${[...names].join(', ')}.` }];
	return spec.series.flatMap((series, i) => [
		...lacks(`/series/${i}/column`, series.column),
		...series.transform.flatMap((step, j) =>
			'column' in step ? lacks(`/series/${i}/transform/${j}/column`, step.column) : []
		)
	]);
};

/**
 * Lays the columns on consecutive periods: a period that the table leaves out becomes a blank, never a figure.
 *
 * @throws Invalid when frequency or columns are not those of the specification
 */
export const gridOf = (spec: Specification, data: Data): Grid => {
	if (data.frequency !== spec.frequency)
		throw new Invalid([
			{
				pointer: '/frequency',
				message: `The specification is ${spec.frequency}, the data are ${data.frequency}.`
			}
		]);
	const issues = missing(spec, data);
	if (issues.length > 0) throw new Invalid(issues);
	const at = data.periods.map((text) => periodIndex(text, data.frequency));
	const wrong = at.indexOf(undefined);
	if (wrong >= 0 || at.length === 0)
		throw new Invalid([
			{
				pointer: '',
				message: at.length === 0 ? 'The data have no periods.' : `${data.periods[wrong]} is not a period.`
			}
		]);
	const numbers = at as number[];
	const first = Math.min(...numbers);
	const length = Math.max(...numbers) - first + 1;
	const lay = (values: readonly (number | null)[]): (number | null)[] => {
		const laid = new Array<number | null>(length).fill(null);
		numbers.forEach((number, i) => (laid[number - first] = values[i] ?? null));
		return laid;
	};
	return Object.freeze({
		periods: Object.freeze(Array.from({ length }, (_, i) => periodText(first + i, data.frequency))),
		columns: new Map(data.columns.map(({ name, values }) => [name, lay(values)]))
	});
};
