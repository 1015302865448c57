import type { GridRow } from './grid';
import { reject, shown } from './rejected';
import { markEvidence, type DecimalMark } from './numbers';

/** A column to look at: its name and its place in the rows. */
export interface PlacedColumn {
	readonly name: string;
	readonly at: number;
}

interface Seen {
	readonly column: string;
	readonly cell: { readonly row: number; readonly text: string };
}

/**
 * The decimal mark of a file, from its decisive cells; one mark a file.
 * @throws Rejected `mixed-decimal` where cells contradict each other, `ambiguous-number` where only the uploader knows.
 */
export const decimalMarkOf = (
	columns: readonly PlacedColumn[],
	rows: readonly GridRow[],
	chosen?: DecimalMark
): DecimalMark => {
	if (chosen) return chosen;
	let dot: Seen | undefined;
	let comma: Seen | undefined;
	let either: Seen | undefined;
	for (const { name: column, at } of columns)
		for (const { row, cells } of rows) {
			const text = cells[at];
			if (typeof text !== 'string') continue;
			// A lone point says nothing new once one is known, and nearly every cell of a large file has just that.
			if (dot && !text.includes(',') && text.indexOf('.') === text.lastIndexOf('.')) continue;
			const evidence = markEvidence(text);
			if (evidence === undefined) continue;
			const seen = { column, cell: { row, text } };
			if (evidence === '.') dot ??= seen;
			else if (evidence === ',') comma ??= seen;
			else if (evidence === 'thousand-or-point') either ??= seen;
			if (dot && comma) return contradiction(comma, dot);
		}
	if (comma) return ',';
	if (dot || !either) return '.';
	const { column, cell } = either;
	const digits = cell.text.trim().replace(',', '');
	return reject('ambiguous-number', [column, shown(cell.text.trim())], { row: cell.row, column }, [
		{
			choice: 'decimal',
			options: [
				{ value: '.', label: `Decimal point: ${cell.text.trim()} is ${digits}` },
				{ value: ',', label: `Decimal comma: ${cell.text.trim()} is ${cell.text.trim().replace(',', '.')}` }
			]
		}
	]);
};

const contradiction = (comma: Seen, dot: Seen): never =>
	reject(
		'mixed-decimal',
		[dot.column, shown(comma.cell.text), comma.cell.row, shown(dot.cell.text), dot.cell.row],
		{ row: Math.max(comma.cell.row, dot.cell.row), column: dot.column }
	);
