import type { Issue } from './faults';

/** What went wrong in a file, in the words that say how to mend it. The list is closed. */
export const sentences = {
	empty: () => 'The file has no rows. Give a table with one row a period.',
	'no-data': () => 'The file names columns but holds no row below them.',
	'no-numbers': () => 'No column holds numbers.',
	'too-short': (n: number, needed: number) => `${n} observations; at least ${needed} are needed.`,
	'no-header': () => 'The first row must name the columns. Choose the header row, or say that there is none.',
	'column-twice': (a: number, b: number, name: string) =>
		`Columns ${a} and ${b} are both called ${name}. Give each column its own name.`,
	'column-name': (name: string, why: string) => `Column name "${name}" ${why}.`,
	ragged: (row: number, fields: number, header: number) =>
		`Row ${row} has ${fields} ${fields === 1 ? 'field' : 'fields'}, the header ${header}.`,
	quote: (row: number, what: string) => `${what} in row ${row}. Double each quote inside a quoted field.`,
	'line-end': (row: number) =>
		`Row ${row} holds a lone carriage return inside a field. Save with one kind of line end.`,
	control: (row: number, byte: number) =>
		`Row ${row} holds a control character (byte ${byte}). Remove it and save again.`,
	encoding: (row: number, guess: string) =>
		`Row ${row} is not UTF-8; it looks like ${guess}. Save as CSV UTF-8.`,
	delimiter: () => 'The columns can be separated in two ways. Choose the delimiter.',
	'ambiguous-number': (column: string, text: string) =>
		`Column ${column}: is ${text} a thousand and more, or one point something? Choose the decimal mark.`,
	'mixed-decimal': (column: string, a: string, rowA: number, b: string, rowB: number) =>
		`Column ${column} mixes ${a} (row ${rowA}) and ${b} (row ${rowB}). Use one decimal mark.`,
	number: (row: number, column: string, text: string) =>
		`Row ${row}, column ${column}: "${text}" is not a number.`,
	digits: (row: number, column: string, text: string) =>
		`Row ${row}, column ${column}: "${text}" is written in other digits. Use 0 to 9.`,
	mark: (n: number, text: string) =>
		`${n} ${n === 1 ? 'cell carries' : 'cells carry'} a mark such as ${text}; remove it and give the unit.`,
	'not-finite': (row: number, column: string, text: string) =>
		`Row ${row}, column ${column}: ${text} is infinite. Leave the cell empty where there is no figure.`,
	overflow: (row: number, column: string, text: string) =>
		`Row ${row}, column ${column}: ${text} is beyond the largest number. Use a larger unit.`,
	'ambiguous-date': (text: string, one: string, other: string) =>
		`Is ${text} ${one} or ${other}? Choose the order of day and month.`,
	'mixed-dates': (row: number, text: string, first: string) =>
		`Row ${row}: "${text}" is written in another way than "${first}". Write all periods in one way.`,
	date: (row: number, text: string) =>
		`Row ${row}: "${text}" is not a date or period, such as 2024-03-31 or 2024Q1.`,
	time: (row: number, text: string) =>
		`Row ${row}: "${text}" holds a time of day. Give periods or dates only.`,
	'looks-like-serials': (row: number, text: string) =>
		`Row ${row}: ${text} looks like a spreadsheet's day number. Format the column as dates and save again.`,
	future: (column: string, period: string, vintage: string) =>
		`Column ${column} has figures for ${period}, after its vintage date ${vintage}. Mark it as a scenario or correct the date.`,
	'period-twice': (period: string, a: number, b: number) =>
		`${period} stands in rows ${a} and ${b}. Keep one.`,
	'mixed-frequency': (first: string, row: number, then: string) =>
		`${first} until row ${row}, then ${then}. Give one frequency in a file.`,
	'not-a-frequency': (found: string) =>
		`The periods are ${found} apart. Give annual, quarterly or monthly figures.`,
	'same-file': (ref: string) => `This is ${ref} already.`,
	'vintage-twice': (ref: string, column: string) =>
		`${ref} has this date with other figures for ${column}; give another vintage date.`,
	changed: () => 'The file differs from the one previewed. Look at the preview again.',
	'too-large': (mebibytes: number) => `Over ${mebibytes} MiB.`,
	'too-many-rows': (n: number) => `More than ${n} rows.`,
	'too-many-columns': (n: number) => `More than ${n} columns.`,
	'too-many-cells': (n: number) => `More than ${n} cells.`,
	'too-long-cell': (row: number, n: number) =>
		`Row ${row} holds a cell or line of more than ${n} characters.`,
	'too-many-sheets': (n: number) => `More than ${n} sheets.`,
	sheet: () => 'The workbook has several sheets. Choose one.',
	'no-value': (cell: string) => `Cell ${cell} has a formula without a stored value; recalculate and save.`,
	'cell-error': (cell: string, error: string) => `Cell ${cell} holds ${error}. Mend it or leave it empty.`,
	layout: (what: string) => `${what}; choose header row and range.`,
	macros: () => 'The workbook carries code or embedded objects; save as .xlsx without them.',
	'not-a-table': (what: string) => `This is ${what}; save as CSV or XLSX.`,
	encrypted: () => 'The file is password-protected. Save it without a password.',
	'unpacks-too-large': (mebibytes: number) => `Unpacks to more than ${mebibytes} MiB.`,
	'corrupt-zip': (what: string) => `The workbook is damaged (${what}); open and save it again.`,
	xml: (partName: string) => `The workbook is damaged (${partName}); open and save it again.`,
	corrupt: (partName: string) => `The workbook is damaged (${partName}); open and save it again.`,
	'xml-dtd': () => 'The workbook holds a document type or a processing instruction; not accepted.',
	'file-name': (name: string) => `File name "${name}" holds a character that cannot be shown safely.`,
	request: (what: string) => `${what}.`,
	'column-unknown': (name: string) => `The file has no column ${name}.`,
	'too-much-memory': () =>
		'Reading the file takes too much memory. Give a smaller file, or save the one sheet as CSV.',
	'took-too-long': (seconds: number) =>
		`Reading the file took more than ${seconds} seconds. Give a smaller file.`
} as const;

export type UploadCode = keyof typeof sentences;

export interface UploadIssue extends Issue {
	readonly code: UploadCode;
}

/** Codes that a choice of the uploader can settle: the upload waits instead of being refused. */
export const questionCodes: ReadonlySet<UploadCode> = new Set([
	'delimiter',
	'ambiguous-number',
	'ambiguous-date',
	'no-header',
	'layout',
	'sheet'
]);

/** Builds an issue of the closed list, with its sentence. */
export const uploadIssue = <C extends UploadCode>(
	code: C,
	words: Parameters<(typeof sentences)[C]>,
	place: { readonly row?: number; readonly column?: string; readonly pointer?: string } = {}
): UploadIssue => {
	const sentence = sentences[code] as (...words: unknown[]) => string;
	return Object.freeze({ pointer: '', ...place, code, message: sentence(...words) });
};
