import { limits } from '$lib/domain/lineage';
import { areaOf, cellName, columnNumber, type Area } from './grid';
import { reject } from './rejected';
import { scanXml, type Attributes } from './xml';

/** What the markup of a sheet says beside its values. */
export interface SheetFacts {
	readonly formulas: number;
	/** Cells with an error, as `row column`, and its name. */
	readonly errors: readonly { readonly row: number; readonly column: number; readonly error: string }[];
	readonly merged: readonly Area[];
	readonly hiddenRows: number;
	readonly hiddenColumns: readonly number[];
	readonly filtered: boolean;
	/** Cells whose raw value is the serial 60, the day that never was; `row column`. */
	readonly sixty: ReadonlySet<string>;
	/** Last row and column that hold a value; 0 and -1 where none does. */
	readonly lastRow: number;
	readonly lastColumn: number;
}

const mostRows = 1_048_576;
const mostColumns = 16_384;

class Sheet {
	formulas = 0;
	readonly errors: { row: number; column: number; error: string }[] = [];
	readonly merged: Area[] = [];
	hiddenRows = 0;
	readonly hiddenColumns: number[] = [];
	filtered = false;
	readonly sixty = new Set<string>();
	lastRow = 0;
	lastColumn = -1;

	private row = 0;
	private column = -1;
	private rows = 0;
	private cells = 0;
	private inCell = false;
	private type = '';
	private formula = false;
	private value: string | undefined;
	private inValue = false;

	constructor(
		private readonly part: string,
		private readonly sharedStrings: number
	) {}

	open(name: string, attributes: Attributes): void {
		if (name === 'row') this.openRow(attributes);
		else if (name === 'c') this.openCell(attributes);
		else if (name === 'f' && this.inCell) this.formula = true;
		else if (name === 'v' && this.inCell) {
			this.inValue = true;
			this.value = '';
		} else if (name === 'is' && this.inCell) this.value = '';
		else if (name === 'mergeCell') this.merge(attributes.ref ?? '');
		else if (name === 'autoFilter') this.filtered = true;
		else if (name === 'col' && /^(?:1|true)$/.test(attributes.hidden ?? '')) this.hideColumns(attributes);
	}

	text(text: string): void {
		if (this.inValue) this.value += text;
	}

	close(name: string): void {
		if (name === 'v') this.inValue = false;
		else if (name === 'c' && this.inCell) this.closeCell();
	}

	private corrupt(what: string): never {
		return reject('corrupt', [`${this.part}: ${what}`]);
	}

	private openRow(attributes: Attributes): void {
		const row = attributes.r === undefined ? this.row + 1 : Number(attributes.r);
		if (!Number.isInteger(row) || row <= this.row || row > mostRows)
			this.corrupt(`row ${attributes.r ?? row}`);
		this.row = row;
		this.column = -1;
		if (++this.rows > limits.rows + 1) reject('too-many-rows', [limits.rows]);
		if (/^(?:1|true)$/.test(attributes.hidden ?? '')) this.hiddenRows++;
	}

	private openCell(attributes: Attributes): void {
		let column = this.column + 1;
		if (attributes.r !== undefined) {
			const parts = /^([A-Z]{1,3})([1-9]\d{0,6})$/.exec(attributes.r);
			column = parts ? columnNumber(parts[1]!) : -1;
			if (!parts || Number(parts[2]) !== this.row) this.corrupt(`cell ${attributes.r}`);
		}
		if (column <= this.column || column >= mostColumns || this.row === 0)
			this.corrupt(`cell ${attributes.r ?? ''}`);
		if (++this.cells > limits.cells) reject('too-many-cells', [limits.cells]);
		this.column = column;
		this.inCell = true;
		this.type = attributes.t ?? 'n';
		this.formula = false;
		this.value = undefined;
	}

	private closeCell(): void {
		this.inCell = false;
		const { value, row, column } = this;
		if (this.formula) {
			this.formulas++;
			if (value === undefined) reject('no-value', [cellName(row, column)], { row });
		}
		if (value === undefined) return;
		this.lastRow = row;
		this.lastColumn = Math.max(this.lastColumn, column);
		if (column >= limits.columns) reject('too-many-columns', [limits.columns], { row });
		if (this.type === 's') {
			const index = /^\d{1,9}$/.test(value) ? Number(value) : -1;
			if (index < 0 || index >= this.sharedStrings)
				this.corrupt(`text ${value} of cell ${cellName(row, column)}`);
		} else if (this.type === 'e') this.errors.push({ row, column, error: value });
		else if (this.type === 'n' && value !== '') {
			const number = Number(value);
			if (Number.isNaN(number)) this.corrupt(`value of cell ${cellName(row, column)}`);
			if (number >= 60 && number < 61) this.sixty.add(`${row} ${column}`);
		}
	}

	private merge(ref: string): void {
		if (!/^[A-Z]{1,3}[1-9]\d{0,6}:[A-Z]{1,3}[1-9]\d{0,6}$/.test(ref)) this.corrupt('merged cells');
		this.merged.push(areaOf(ref));
	}

	private hideColumns(attributes: Attributes): void {
		const from = Number(attributes.min);
		const to = Math.min(Number(attributes.max), limits.columns);
		for (let column = from; column <= to; column++) this.hiddenColumns.push(column - 1);
	}
}

/**
 * Walks a sheet's markup: rows and cells in order and in place, texts within the shared table, formulas with a stored
 * value. What is counted is what is read; the sheet's own dimension is not asked.
 * @throws Rejected `xml`, `corrupt`, `no-value`, `too-many-rows` or `too-many-cells`.
 */
export const scanSheet = (part: string, bytes: Uint8Array, sharedStrings: number): SheetFacts => {
	const sheet = new Sheet(part, sharedStrings);
	let root = '';
	scanXml(part, bytes, {
		open: (name, attributes) => {
			root ||= name;
			sheet.open(name, attributes);
		},
		text: (text) => sheet.text(text),
		close: (name) => sheet.close(name)
	});
	if (root !== 'worksheet') reject('xml', [part]);
	return sheet;
};
