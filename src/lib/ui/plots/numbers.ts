import { formatSignificant, NONE } from '../format';
import type { PlotTable } from './frame';

/** The table of several series over the same periods. */
export function seriesTable(
	first: string,
	labels: readonly string[],
	columns: readonly { readonly head: string; readonly values: readonly (number | null)[] }[]
): PlotTable {
	return {
		heads: [first, ...columns.map(({ head }) => head)],
		rows: labels.map((label, i) => [
			label,
			...columns.map(({ values }) => {
				const value = values[i] ?? null;
				return value === null ? NONE : formatSignificant(value, 5);
			})
		])
	};
}

/** First and last of the periods: `1959-Q1 to 2009-Q3`. */
export function span(periods: readonly string[]): string {
	return `${periods[0] ?? NONE} to ${periods.at(-1) ?? NONE}`;
}
