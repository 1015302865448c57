import type { Note } from '$lib/domain/lineage';

/** A cell as the file holds it. Text is not yet read as a number; a workbook's numbers and dates come typed. */
export type Cell = string | number | boolean | Date | null;

export interface GridRow {
	/** Row of the file, counted from 1. */
	readonly row: number;
	readonly cells: readonly Cell[];
}

/** The cells of a CSV file or of one sheet, before any meaning is given to them. */
export interface Grid {
	readonly rows: readonly GridRow[];
	/** Whether a row must have as many fields as the header: true of CSV, where a missing one shifts the rest. */
	readonly even: boolean;
	/** Ranges of merged cells, such as A1:C1. */
	readonly merged: readonly Area[];
	readonly notes: readonly Note[];
}

/** A rectangle of cells; rows from 1, columns from 0, both ends included. */
export interface Area {
	readonly top: number;
	readonly bottom: number;
	readonly left: number;
	readonly right: number;
}

/** `columnLetters(27)` is AB; columns count from 0. */
export const columnLetters = (column: number): string => {
	let letters = '';
	for (let n = column + 1; n > 0; n = Math.floor((n - 1) / 26))
		letters = String.fromCharCode(65 + ((n - 1) % 26)) + letters;
	return letters;
};

/** `cellName(7, 1)` is B7. */
export const cellName = (row: number, column: number): string => `${columnLetters(column)}${row}`;

/** Column number of letters, from 0. */
export const columnNumber = (letters: string): number =>
	[...letters].reduce((sum, letter) => sum * 26 + letter.charCodeAt(0) - 64, 0) - 1;

/** Reads A3:F120; the corners may stand in any order. */
export const areaOf = (range: string): Area => {
	const corners = range.split(':').map((corner) => {
		const [, letters = 'A', digits = '1'] = /^([A-Z]+)(\d+)$/.exec(corner) ?? [];
		return { row: Number(digits), column: columnNumber(letters) };
	});
	const a = corners[0]!;
	const b = corners[1] ?? a;
	return {
		top: Math.min(a.row, b.row),
		bottom: Math.max(a.row, b.row),
		left: Math.min(a.column, b.column),
		right: Math.max(a.column, b.column)
	};
};

export const areaText = (area: Area): string =>
	`${cellName(area.top, area.left)}:${cellName(area.bottom, area.right)}`;

/** A cell without content. */
export const blank = (cell: Cell | undefined): boolean =>
	cell === null || cell === undefined || (typeof cell === 'string' && cell.trim() === '');
