import type { Note, ParsedColumn } from '$lib/domain/lineage';
import { uploadIssue, type UploadIssue } from '$lib/domain/lineage-codes';
import type { Cell } from './grid';
import { readNumber, type DecimalMark, type NumberFlag } from './numbers';
import { shown } from './rejected';

/** Cells named in one refusal. */
export const listedCells = 20;

/** A column that is not numbers, and its first text. */
export interface LeftOutColumn {
	readonly name: string;
	readonly sample: string;
}

/** A cell as text; a date at midnight without its time. */
export const cellText = (cell: Cell): string => {
	if (cell instanceof Date) return cell.toISOString().replace('T00:00:00.000Z', '');
	return cell === null ? '' : String(cell);
};

/** A column read as numbers, and how. */
export interface NumberColumn {
	readonly column: ParsedColumn;
	readonly notes: readonly Note[];
}

const flagWords: Readonly<Record<NumberFlag, string>> = {
	groups: 'separators of thousands were taken out',
	'minus-sign': 'the typographic minus sign was read as minus',
	underflow: 'a figure too small for a double was read as 0',
	'many-digits': 'figures of more than 17 digits were read as the nearest double'
};

/** Reads a column cell by cell; its verdict stands once all were added. */
export class ColumnReader {
	private readonly values: (number | null)[] = [];
	private readonly flags = new Map<NumberFlag, number>();
	private readonly faults: UploadIssue[] = [];
	private readonly marks: { row: number; text: string }[] = [];
	private numbersInText = 0;
	private found = 0;
	private words = 0;
	private sample = '';

	constructor(
		private readonly name: string,
		private readonly mark: DecimalMark,
		private readonly typed: boolean
	) {}

	add(row: number, cell: Cell): void {
		if (typeof cell === 'number') {
			this.found++;
			this.values.push(cell === 0 ? 0 : cell);
			return;
		}
		const text = cellText(cell);
		const reading = typeof cell === 'string' || cell === null ? readNumber(text, this.mark) : undefined;
		this.values.push(reading?.kind === 'value' ? reading.value : null);
		if (reading?.kind === 'missing') return;
		if (reading?.kind === 'value') {
			this.found++;
			if (this.typed) this.numbersInText++;
			for (const flag of reading.flags) this.flags.set(flag, (this.flags.get(flag) ?? 0) + 1);
			return;
		}
		const code = reading?.code ?? 'number';
		if (code === 'mark') this.marks.push({ row, text });
		else if (code === 'number') {
			if (this.words++ === 0) this.sample = text;
			this.fault(uploadIssue('number', [row, this.name, shown(text)], { row, column: this.name }));
		} else this.fault(uploadIssue(code, [row, this.name, shown(text)], { row, column: this.name }));
	}

	private fault(issue: UploadIssue): void {
		if (this.faults.length < listedCells) this.faults.push(issue);
	}

	/** A column of words only: left out, not refused. */
	get leftOut(): LeftOutColumn | undefined {
		const wordsOnly =
			this.found === 0 &&
			this.marks.length === 0 &&
			this.words > 0 &&
			this.faults.every(({ code }) => code === 'number');
		return wordsOnly ? { name: this.name, sample: shown(this.sample) } : undefined;
	}

	issues(): UploadIssue[] {
		const first = this.marks[0];
		const marks = first
			? [uploadIssue('mark', [this.marks.length, shown(first.text)], { row: first.row, column: this.name })]
			: [];
		return [...marks, ...this.faults];
	}

	result(order: readonly number[]): NumberColumn {
		const notes: Note[] = [...this.flags].map(([flag, n]) => ({
			code: flag,
			message: `${this.name}: ${flagWords[flag]} (${n} ${n === 1 ? 'cell' : 'cells'}).`,
			column: this.name
		}));
		if (this.numbersInText > 0)
			notes.push({
				code: 'text-numbers',
				message: `${this.name}: ${this.numbersInText} numbers were stored as text.`,
				column: this.name
			});
		return { column: { name: this.name, values: order.map((i) => this.values[i] ?? null) }, notes };
	}
}
