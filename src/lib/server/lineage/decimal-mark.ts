import { shown, reject } from './rejected';
import { markEvidence, type DecimalMark } from './numbers';

/** A cell of text with its place. */
export interface TextCell {
	readonly row: number;
	readonly text: string;
}

export interface TextColumn {
	readonly name: string;
	readonly cells: readonly TextCell[];
}

interface Seen {
	readonly column: string;
	readonly cell: TextCell;
}

/**
 * The decimal mark of a file, from its decisive cells; one mark a file.
 * @throws Rejected `mixed-decimal` where cells contradict each other, `ambiguous-number` where only the uploader knows.
 */
export const decimalMarkOf = (columns: readonly TextColumn[], chosen?: DecimalMark): DecimalMark => {
	if (chosen) return chosen;
	let dot: Seen | undefined;
	let comma: Seen | undefined;
	let either: Seen | undefined;
	for (const { name, cells } of columns)
		for (const cell of cells) {
			const evidence = markEvidence(cell.text);
			const seen = { column: name, cell };
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
