import { limits, type Choices, type Note, type ParsedTable } from '$lib/domain/lineage';
import { cellText, ColumnReader, listedCells, type LeftOutColumn } from './column-reader';
import { decimalMarkOf } from './decimal-mark';
import { blank, type Cell, type Grid } from './grid';
import { findTable, type NamedTable } from './header';
import type { DecimalMark } from './numbers';
import { readPeriod } from './period-text';
import { readPeriods, type PeriodCell } from './periods';
import { reject, Rejected, shown } from './rejected';

export interface TableReading {
	readonly table: ParsedTable;
	readonly periodColumn: string;
	readonly leftOut: readonly LeftOutColumn[];
}

const isPeriod = (cell: Cell | undefined): boolean =>
	!blank(cell) && readPeriod(cellText(cell ?? null)).kind !== 'fault';

interface PeriodSource {
	readonly name: string;
	/** Columns used up by the periods. */
	readonly columns: readonly number[];
	readonly cells: readonly PeriodCell[];
}

const cellsOf = (named: NamedTable, column: number): PeriodCell[] =>
	named.rows.map(({ row, cells }) => ({ row, text: cellText(cells[column] ?? null) }));

/** A column of years beside one of quarters or months. */
const yearAndPart = (named: NamedTable): PeriodSource | undefined => {
	const folded = named.names.map((name) => name.toLowerCase());
	const year = folded.indexOf('year');
	const part = folded.findIndex((name) => /^(?:quarter|qtr|month)$/.test(name));
	if (year === -1 || part === -1) return undefined;
	const letter = folded[part] === 'month' ? 'M' : 'Q';
	const whole = (cell: Cell | undefined): string =>
		cellText(cell ?? null)
			.trim()
			.replace(/\.0+$/, '');
	return {
		name: `${named.names[year]} and ${named.names[part]}`,
		columns: [year, part],
		cells: named.rows.map(({ row, cells }) => ({
			row,
			text: `${whole(cells[year])}${letter}${whole(cells[part])}`
		}))
	};
};

/** The chosen column, else the first when it starts with a period, else the first that holds periods throughout. */
const periodSource = (named: NamedTable, chosen: string | undefined): PeriodSource => {
	const at = (column: number): PeriodSource => ({
		name: named.names[column]!,
		columns: [column],
		cells: cellsOf(named, column)
	});
	if (chosen !== undefined) {
		const column = named.names.indexOf(chosen);
		return column === -1 ? reject('column-unknown', [shown(chosen)]) : at(column);
	}
	const pair = yearAndPart(named);
	if (pair) return pair;
	if (isPeriod(named.rows[0]?.cells[0])) return at(0);
	const other = named.names.findIndex((_, i) => named.rows.every(({ cells }) => isPeriod(cells[i])));
	return at(Math.max(0, other));
};

const readColumns = (
	named: NamedTable,
	columns: readonly number[],
	mark: DecimalMark,
	typed: boolean
): ColumnReader[] => {
	const readers = columns.map((i) => {
		const reader = new ColumnReader(named.names[i]!, mark, typed);
		for (const { row, cells } of named.rows) reader.add(row, cells[i] ?? null);
		return reader;
	});
	const issues = readers.flatMap((reader) => (reader.leftOut ? [] : reader.issues()));
	if (issues.length > 0) throw new Rejected(issues.slice(0, listedCells));
	return readers;
};

const checkSize = (observations: number, series: number): void => {
	if (observations < limits.leastObservations) reject('too-short', [observations, limits.leastObservations]);
	if (observations > limits.mostObservations) reject('too-many-rows', [limits.mostObservations]);
	if (series === 0) reject('no-numbers', []);
	if (series > limits.series) reject('too-many-columns', [limits.series]);
};

/**
 * Gives a grid its meaning: one column of periods, the others numbers; columns of words are left out and named.
 * @throws Rejected with every issue found in the cells, twenty at most.
 */
export const readTable = (grid: Grid, choices: Choices): TableReading => {
	const named = findTable(grid, choices);
	const source = periodSource(named, choices.periodColumn);
	const periods = readPeriods(source.cells, choices.dateOrder);
	const columns = named.names.map((_, i) => i).filter((i) => !source.columns.includes(i));
	const placed = columns.map((at) => ({ name: named.names[at]!, at }));
	const mark = decimalMarkOf(placed, named.rows, choices.decimal);
	const readers = readColumns(named, columns, mark, !grid.even);
	const leftOut = readers.flatMap((reader) => reader.leftOut ?? []);
	const kept = readers.filter((reader) => !reader.leftOut).map((reader) => reader.result(periods.order));
	checkSize(periods.periods.length, kept.length);
	const notes: Note[] = [...grid.notes, ...named.notes, ...periods.notes];
	if (mark === ',') notes.push({ code: 'decimal-comma', message: 'Read as decimal comma.' });
	for (const { name, sample } of leftOut)
		notes.push({
			code: 'text-column',
			message: `${name} holds words (${sample}) and was left out.`,
			column: name
		});
	const table: ParsedTable = {
		frequency: periods.frequency,
		periods: periods.periods,
		columns: kept.map(({ column }) => column),
		notes: [...notes, ...kept.flatMap((column) => column.notes)]
	};
	return { table, periodColumn: source.name, leftOut };
};
