import { compareSeries } from '$lib/domain/lineage-comparison';
import type { ParsedTable } from '$lib/domain/lineage';
import { uploadIssue, type UploadIssue } from '$lib/domain/lineage-codes';
import { periodIndex, periodsPerYear, type Frequency } from '$lib/domain/period';
import type { Ctx } from '../context';
import type { Handle } from '../db/handle';
import { vintagesOfDataset } from './lineage.queries';
import { readTable, storedVintage, type ColumnLineage } from './read';

/** Number of the period that holds a day, `2026-03-31`. */
const periodOfDay = (day: string, frequency: Frequency): number => {
	const perYear = periodsPerYear[frequency];
	return Number(day.slice(0, 4)) * perYear + Math.floor(((Number(day.slice(5, 7)) - 1) * perYear) / 12);
};

/** Observed figures for periods that begin after the day they were taken from their source. */
export const futureFigures = (table: ParsedTable, columns: readonly ColumnLineage[]): UploadIssue[] =>
	columns.flatMap(({ name, role, vintageDate }, i) => {
		const values = table.columns.find((column) => column.name === name)?.values;
		if (role !== 'observed' || vintageDate === undefined || !values) return [];
		const last = values.findLastIndex((value) => value !== null);
		const period = table.periods[last];
		if (period === undefined) return [];
		const late = periodIndex(period, table.frequency)! > periodOfDay(vintageDate, table.frequency);
		return late
			? [
					uploadIssue('future', [name, period, vintageDate], {
						pointer: `/columns/${i}/vintageDate`,
						column: name
					})
				]
			: [];
	});

/** Figures of a column by period. */
export const figuresOf = (table: ParsedTable, name: string): ReadonlyMap<string, number> => {
	const found = new Map<string, number>();
	table.columns
		.find((column) => column.name === name)
		?.values.forEach((value, i) => {
			if (value !== null) found.set(table.periods[i]!, value);
		});
	return found;
};

/** Series that the dataset already holds under the same vintage date with other figures. */
export const storedTwice = (
	ctx: Ctx,
	handle: Handle,
	dataset: string,
	table: ParsedTable,
	columns: readonly ColumnLineage[]
): UploadIssue[] => {
	for (const row of handle.all(vintagesOfDataset(handle.q, dataset))) {
		const vintage = storedVintage(handle, row);
		const twins = columns.flatMap((column, i) => {
			const before = vintage.columns.find(
				({ series, vintageDate }) =>
					series !== undefined && series === column.series && vintageDate === column.vintageDate
			);
			return before ? [{ column, before, i }] : [];
		});
		if (twins.length === 0) continue;
		const stored = readTable(ctx, vintage);
		const issues = twins.flatMap(({ column, before, i }) => {
			const { change, newPeriods, lostPeriods } = compareSeries(
				column.name,
				figuresOf(stored, before.name),
				figuresOf(table, column.name)
			);
			const equal = change === 'unchanged' && newPeriods.length === 0 && lostPeriods.length === 0;
			return equal
				? []
				: [
						uploadIssue('vintage-twice', [vintage.ref, column.name], {
							pointer: `/columns/${i}/vintageDate`,
							column: column.name
						})
					];
		});
		if (issues.length > 0) return issues;
	}
	return [];
};
