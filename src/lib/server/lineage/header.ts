import type { Choices, Note } from '$lib/domain/lineage';
import { uploadIssue, type UploadIssue } from '$lib/domain/lineage-codes';
import { areaOf, areaText, blank, type Area, type Cell, type Grid, type GridRow } from './grid';
import { readNumber } from './numbers';
import { readPeriod } from './period-text';
import { reject, Rejected, shown, type Question } from './rejected';

/** A table found in a grid: named columns over rows of cells. */
export interface NamedTable {
	readonly names: readonly string[];
	readonly rows: readonly GridRow[];
	readonly notes: readonly Note[];
}

const listed = 10;
const longestName = 200;

const text = (cell: Cell | undefined): string =>
	cell instanceof Date
		? cell.toISOString().slice(0, 10)
		: cell === null || cell === undefined
			? ''
			: String(cell).trim();

const filled = (row: GridRow): number => row.cells.filter((cell) => !blank(cell)).length;

/** A cell that is data by its look: a number, a date, or text that reads as one. */
const looksLikeData = (cell: Cell): boolean => {
	if (typeof cell !== 'string') return true;
	return (
		readPeriod(cell).kind !== 'fault' ||
		readNumber(cell, '.').kind === 'value' ||
		readNumber(cell, ',').kind === 'value'
	);
};

const inArea = (rows: readonly GridRow[], area: Area): GridRow[] =>
	rows
		.filter(({ row }) => row >= area.top && row <= area.bottom)
		.map(({ row, cells }) => ({ row, cells: cells.slice(area.left, area.right + 1) }));

const askRow = (rows: readonly GridRow[], proposal: number | undefined): readonly Question[] => [
	{
		choice: 'headerRow',
		options: [
			...rows.slice(0, listed).map((row) => ({
				value: String(row.row),
				label: `Row ${row.row}: ${shown(row.cells.map(text).filter(Boolean).join(', '))}`
			})),
			{ value: '0', label: 'No row names the columns' }
		],
		...(proposal === undefined ? {} : { proposal: String(proposal) })
	},
	{ choice: 'range', options: [] }
];

/** Signs that the table does not start in the first row: a title, a second row of words, no names at all. */
const askWhere = (rows: readonly GridRow[]): void => {
	const [first, second, third] = rows;
	if (!first || !second) return;
	const table = rows.find((row) => filled(row) >= 2);
	if (filled(first) === 1 && !blank(first.cells[0]) && table && table !== first)
		reject('layout', [`Row ${first.row} looks like a title`], { row: first.row }, askRow(rows, table.row));
	if (first.cells.every((cell) => !blank(cell) && looksLikeData(cell)))
		reject('no-header', [], { row: first.row }, askRow(rows, 0));
	const words = second.cells.filter((cell) => !blank(cell));
	const below = third?.cells.some((cell) => !blank(cell) && looksLikeData(cell)) ?? false;
	if (
		below &&
		words.length > 0 &&
		words.every((cell) => !looksLikeData(cell) && readNumber(text(cell), '.').kind !== 'missing')
	)
		reject(
			'layout',
			[`Row ${second.row} looks like a second header`],
			{ row: second.row },
			askRow(rows, first.row)
		);
};

const overlaps = (a: Area, b: Area): boolean =>
	a.top <= b.bottom && b.top <= a.bottom && a.left <= b.right && b.left <= a.right;

const refuseMerged = (grid: Grid, area: Area, rows: readonly GridRow[]): void => {
	const merged = grid.merged.find((cells) => overlaps(cells, area));
	if (merged)
		reject(
			'layout',
			[`Merged cells ${areaText(merged)}`],
			{ row: merged.top },
			askRow(rows, merged.bottom + 1)
		);
};

const refuseRagged = (rows: readonly GridRow[], width: number): void => {
	const uneven = rows.filter(({ cells }) => cells.length !== width).slice(0, listed);
	if (uneven.length > 0)
		throw new Rejected(
			uneven.map(({ row, cells }) => uploadIssue('ragged', [row, cells.length, width], { row }))
		);
};

/** Names that JavaScript objects carry themselves, and characters that hide or turn text around. */
const reserved: ReadonlySet<string> = new Set([
	'__proto__',
	'constructor',
	'prototype',
	'tostring',
	'valueof',
	'hasownproperty'
]);
const unsafe = /[\p{Cc}\u200b-\u200f\u202a-\u202e\u2060-\u2069\ufeff]/u;

const nameIssue = (name: string): UploadIssue | undefined => {
	const why =
		name === ''
			? 'is empty'
			: name.length > longestName
				? `has more than ${longestName} characters`
				: reserved.has(name.toLowerCase())
					? 'is reserved'
					: unsafe.test(name)
						? 'holds a character that cannot be shown safely'
						: undefined;
	const seen = name.replace(/[^\P{C}]/gu, '\ufffd');
	return why === undefined
		? undefined
		: uploadIssue('column-name', [shown(seen), why], { row: 1, column: shown(seen) });
};

const checkNames = (names: readonly string[]): void => {
	const issues = names.flatMap((name) => nameIssue(name) ?? []);
	if (issues.length > 0) throw new Rejected(issues.slice(0, listed));
	const seen = new Map<string, number>();
	names.forEach((name, i) => {
		const folded = name.normalize('NFKC').toLowerCase();
		const before = seen.get(folded);
		if (before !== undefined)
			reject('column-twice', [before + 1, i + 1, shown(name)], { column: shown(name) });
		seen.set(folded, i);
	});
};

const mixedScripts = (names: readonly string[]): Note[] =>
	names
		.filter((name) => /\p{Script=Latin}/u.test(name) && /[\p{Script=Cyrillic}\p{Script=Greek}]/u.test(name))
		.map((name) => ({
			code: 'mixed-scripts',
			message: `${name} mixes letters of two alphabets that look alike.`,
			column: name
		}));

const wholeArea = (rows: readonly GridRow[]): Area => ({
	top: rows[0]?.row ?? 1,
	bottom: rows.at(-1)?.row ?? 1,
	left: 0,
	right: rows.reduce((most, { cells }) => Math.max(most, cells.length), 1) - 1
});

/** Columns without name and content are left out; a first column without a name is taken for the periods. */
const nameColumns = (header: readonly string[], rows: readonly GridRow[], width: number): NamedTable => {
	const notes: Note[] = [];
	const kept: number[] = [];
	for (let i = 0; i < width; i++) if (header[i] || rows.some(({ cells }) => !blank(cells[i]))) kept.push(i);
	const empty = width - kept.length;
	if (empty > 0)
		notes.push({
			code: 'empty-columns',
			message: `${empty} empty ${empty === 1 ? 'column' : 'columns'} left out.`
		});
	const names = kept.map((i) => (header[i] ?? '').normalize('NFC'));
	if (names[0] === '' && kept[0] === 0) {
		names[0] = 'period';
		notes.push({
			code: 'unnamed-periods',
			message: 'The first column has no name; it is read as the periods.'
		});
	}
	checkNames(names);
	const whole = kept.length === width;
	return {
		names,
		rows: whole ? rows : rows.map(({ row, cells }) => ({ row, cells: kept.map((i) => cells[i] ?? null) })),
		notes: [...notes, ...mixedScripts(names)]
	};
};

/**
 * Finds the table in a grid: the header row (the first, or the one chosen), the rows below it, the names of its columns.
 * @throws Rejected `empty`, `no-data`, `no-header`, `layout`, `ragged`, `column-name` or `column-twice`.
 */
export const findTable = (grid: Grid, choices: Choices): NamedTable => {
	const { headerRow, range } = choices;
	const all = grid.rows.filter((row) => filled(row) > 0);
	if (all.length === 0) reject('empty', []);
	const area = range === undefined ? wholeArea(all) : areaOf(range);
	const rows = range === undefined ? all : inArea(all, area);
	if (headerRow === undefined && range === undefined) {
		refuseMerged(grid, area, rows);
		askWhere(rows);
	}
	const headers = range === undefined ? all : inArea(all, { ...area, top: 1, bottom: Infinity });
	const header = headerRow === 0 ? undefined : headers.find(({ row }) => row === (headerRow ?? rows[0]?.row));
	if (headerRow !== 0 && !header)
		reject(
			'layout',
			[headerRow === undefined ? 'The range is empty' : `Row ${headerRow} is empty`],
			{},
			askRow(all, undefined)
		);
	const below = header ? rows.filter(({ row }) => row > header.row) : rows;
	if (below.length === 0) reject('no-data', []);
	if (headerRow !== undefined || range !== undefined)
		refuseMerged(grid, { ...area, top: header?.row ?? area.top }, all);
	const width = Math.max(header?.cells.length ?? 0, ...below.map(({ cells }) => cells.length));
	if (grid.even && range === undefined) refuseRagged(below, header?.cells.length ?? below[0]!.cells.length);
	const names = header
		? header.cells.map(text)
		: Array.from({ length: width }, (_, i) => (i === 0 ? 'period' : `column-${i + 1}`));
	return nameColumns(names, below, width);
};
