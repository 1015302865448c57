import { zipSync, type Zippable } from 'fflate';
import { readXlsx } from 'hucre/xlsx';
import type { Choices, Note } from '$lib/domain/lineage';
import { cellName, columnLetters, type Cell, type Grid, type GridRow } from './grid';
import { reject } from './rejected';
import {
	contentTypes,
	readStructure,
	rootRelations,
	workbookPart,
	workbookRelations,
	type Parts,
	type SheetPart,
	type WorkbookStructure
} from './workbook';
import { scanSheet, type SheetFacts } from './worksheet-scan';
import { asUtf8 } from './xml';
import { unpackZip } from './zip';

/** Only the parts that were checked reach the reader, stored and in UTF-8. */
const repack = (parts: Parts, structure: WorkbookStructure, sheet: SheetPart): Uint8Array => {
	const wanted = [contentTypes, rootRelations, workbookPart, workbookRelations, sheet.part];
	if (structure.sharedStrings) wanted.push(structure.sharedStrings.part);
	if (structure.styles) wanted.push(structure.styles);
	const files: Zippable = {};
	for (const name of new Set(wanted)) files[name] = [asUtf8(name, parts.get(name)!), { level: 0 }];
	return zipSync(files);
};

const rowsOf = async (
	bytes: Uint8Array,
	sheet: SheetPart,
	facts: SheetFacts
): Promise<readonly (readonly Cell[])[]> => {
	if (facts.lastColumn < 0) return [];
	try {
		// Only what holds a value: formatted cells far out would make the reader lay out a vast rectangle.
		const range = `A1:${cellName(facts.lastRow, facts.lastColumn)}`;
		const workbook = await readXlsx(bytes, { sheets: [sheet.name], range });
		const found = workbook.sheets.find(({ name }) => name === sheet.name);
		return (found ?? reject('corrupt', [`sheet ${sheet.name}`])).rows;
	} catch (error) {
		if (error instanceof Error && error.name === 'Rejected') throw error;
		return reject('corrupt', [sheet.part]);
	}
};

const choose = (sheets: readonly SheetPart[], chosen: string | undefined): SheetPart => {
	if (chosen !== undefined) {
		const sheet = sheets.find(({ name }) => name === chosen);
		if (sheet) return sheet;
	} else if (sheets.length === 1) return sheets[0]!;
	return reject('sheet', [], {}, [
		{
			choice: 'sheet',
			options: sheets.map(({ name, state }) => ({
				value: name,
				label: state === 'visible' ? name : `${name} (${state})`
			}))
		}
	]);
};

const notApplicable = '#N/A';

const cellErrors = (facts: SheetFacts): void => {
	const error = facts.errors.find((cell) => cell.error !== notApplicable);
	if (error) reject('cell-error', [cellName(error.row, error.column), error.error], { row: error.row });
};

const sheetNotes = (sheet: SheetPart, facts: SheetFacts): Note[] => {
	const notes: Note[] = [
		{ code: 'full-precision', message: 'Values were read at full precision, whatever their format shows.' }
	];
	const say = (code: string, message: string): void => {
		notes.push({ code, message });
	};
	const { formulas, hiddenRows, hiddenColumns } = facts;
	if (formulas > 0)
		say(
			'formulas',
			`${formulas} ${formulas === 1 ? 'value comes from a formula' : 'values come from formulas'}.`
		);
	if (sheet.state !== 'visible') say('hidden', `Sheet ${sheet.name} is ${sheet.state}; it was read.`);
	if (hiddenRows > 0)
		say('hidden', `${hiddenRows} hidden ${hiddenRows === 1 ? 'row was' : 'rows were'} read.`);
	if (hiddenColumns.length > 0)
		say('hidden', `Hidden columns were read: ${hiddenColumns.slice(0, 10).map(columnLetters).join(', ')}.`);
	if (facts.filtered) say('filtered', 'The sheet has a filter; all rows were read, shown or not.');
	return notes;
};

/** The day the 1900 system counts and the calendar does not have must not become a neighbour of itself. */
const typed = (cell: Cell, row: number, column: number, facts: SheetFacts, dates1904: boolean): Cell => {
	if (cell instanceof Date && !dates1904 && facts.sixty.has(`${row} ${column}`))
		return reject('date', [row, '29 February 1900'], { row, column: columnLetters(column) });
	return cell;
};

/**
 * Reads one sheet of a workbook into a grid: values as stored at full precision, dates by number format and date
 * system, formulas by their stored value. Nothing outside the file is followed.
 * @throws Rejected with a code of the closed list.
 */
export const readWorkbook = async (
	bytes: Uint8Array,
	choices: Choices
): Promise<{ grid: Grid; sheet: string; sheets: readonly SheetPart[] }> => {
	const parts = unpackZip(bytes);
	const structure = readStructure(parts);
	const sheet = choose(structure.sheets, choices.sheet);
	const facts = scanSheet(sheet.part, parts.get(sheet.part)!, structure.sharedStrings?.count ?? 0);
	cellErrors(facts);
	const rows = await rowsOf(repack(parts, structure, sheet), sheet, facts);
	const grid: GridRow[] = rows.map((cells, i) => ({
		row: i + 1,
		cells: cells.map((cell, column) => typed(cell, i + 1, column, facts, structure.dates1904))
	}));
	const notes = [...structure.notes, ...sheetNotes(sheet, facts)];
	return {
		grid: { rows: grid, even: false, merged: facts.merged, notes },
		sheet: sheet.name,
		sheets: structure.sheets
	};
};
