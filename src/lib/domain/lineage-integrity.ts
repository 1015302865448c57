import type { Note, ParsedColumn, ParsedTable } from './lineage';
import { periodIndex, periodText, type Frequency } from './period';

/** More equal consecutive changes than this suggest figures filled in by a straight line. */
const equalChanges = 3;

const indices = (table: ParsedTable): number[] =>
	table.periods.map((text) => periodIndex(text, table.frequency)!);

/** Periods missing between the first and the last, as ranges in words. */
export const gapsOf = (
	periods: readonly number[],
	frequency: Frequency
): { from: string; to: string; n: number }[] => {
	const gaps: { from: string; to: string; n: number }[] = [];
	for (let i = 1; i < periods.length; i++) {
		const before = periods[i - 1]!;
		const here = periods[i]!;
		if (here - before > 1)
			gaps.push({
				from: periodText(before + 1, frequency),
				to: periodText(here - 1, frequency),
				n: here - before - 1
			});
	}
	return gaps;
};

const range = (from: string, to: string): string => (from === to ? from : `${from} to ${to}`);

const extent = (column: ParsedColumn): [number, number] | undefined => {
	const first = column.values.findIndex((value) => value !== null);
	if (first === -1) return undefined;
	let last = column.values.length - 1;
	while (column.values[last] === null) last--;
	return [first, last];
};

/** The longest run of equal non-zero changes between neighbouring periods: its number of changes and where it ends. */
export const longestEqualChanges = (
	values: readonly (number | null)[],
	periods: readonly number[]
): { changes: number; from: number; to: number } => {
	let best = { changes: 0, from: 0, to: 0 };
	let start = 0;
	let previous: number | undefined;
	for (let i = 1; i < values.length; i++) {
		const a = values[i - 1] ?? null;
		const b = values[i] ?? null;
		const neighbours = a !== null && b !== null && periods[i]! - periods[i - 1]! === 1;
		const change = neighbours ? b - a : undefined;
		// Changes of decimal figures are equal up to the rounding of their subtraction.
		const slack = 1e-9 * Math.max(Math.abs(a ?? 0), Math.abs(b ?? 0));
		if (change === undefined || change === 0) previous = undefined;
		else {
			if (previous === undefined || Math.abs(change - previous) > slack) start = i;
			previous = change;
			if (i - start + 1 > best.changes) best = { changes: i - start + 1, from: start - 1, to: i };
		}
	}
	return best;
};

const columnFindings = (column: ParsedColumn, table: ParsedTable, at: readonly number[]): Note[] => {
	const notes: Note[] = [];
	const say = (code: string, message: string, period?: string): void => {
		notes.push({ code, message, column: column.name, ...(period === undefined ? {} : { period }) });
	};
	const ends = extent(column);
	if (!ends) {
		say('all-missing', `${column.name} has no figure at all.`);
		return notes;
	}
	const [first, last] = ends;
	const period = (i: number): string => table.periods[i]!;
	if (first > 0) say('starts-at', `${column.name} starts at ${period(first)}.`, period(first));
	if (last < column.values.length - 1)
		say('ends-at', `${column.name} ends at ${period(last)}.`, period(last));
	const holes = column.values.flatMap((value, i) => (value === null && i > first && i < last ? [i] : []));
	if (holes.length > 0) {
		const named = holes.slice(0, 5).map(period).join(', ');
		say(
			'inner-missing',
			`${column.name} lacks ${holes.length} ${holes.length === 1 ? 'figure' : 'figures'} in between: ${named}${holes.length > 5 ? ', …' : ''}.`,
			period(holes[0]!)
		);
	}
	const figures = column.values.filter((value): value is number => value !== null);
	if (figures.length > 1 && figures.every((value) => value === figures[0]))
		say('constant', `${column.name} is ${figures[0]} throughout.`);
	const run = longestEqualChanges(column.values, at);
	if (run.changes > equalChanges)
		say(
			'interpolated',
			`${column.name} changes by the same amount ${run.changes} times in a row, ${range(period(run.from), period(run.to))}: filled in by a straight line?`,
			period(run.from)
		);
	return notes;
};

const equalColumns = (table: ParsedTable): Note[] => {
	const notes: Note[] = [];
	const seen = new Map<string, string>();
	for (const { name, values } of table.columns) {
		if (values.every((value) => value === null)) continue;
		const key = values.join();
		const twin = seen.get(key);
		if (twin === undefined) seen.set(key, name);
		else
			notes.push({ code: 'equal-columns', message: `${name} equals ${twin} in every period.`, column: name });
	}
	return notes;
};

/**
 * What is odd in a table that can nevertheless be read: gaps, missing blocks, constant and equal columns, runs of equal
 * changes (more than three suggest interpolation), periods before 1900. Pure; nothing is mended.
 */
export const integrityFindings = (table: ParsedTable): readonly Note[] => {
	const at = indices(table);
	const notes: Note[] = gapsOf(at, table.frequency).map(({ from, to, n }) => ({
		code: 'gap',
		message: `${n} ${n === 1 ? 'period is' : 'periods are'} missing: ${range(from, to)}.`,
		period: from
	}));
	const oldest = table.periods[0];
	if (oldest !== undefined && Number(oldest.slice(0, 4)) < 1900)
		notes.push({ code: 'before-1900', message: `The data start in ${oldest}.`, period: oldest });
	for (const column of table.columns) notes.push(...columnFindings(column, table, at));
	notes.push(...equalColumns(table));
	return Object.freeze(notes);
};
