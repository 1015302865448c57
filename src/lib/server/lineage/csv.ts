import { CsvError, parse } from 'csv-parse/sync';
import { limits, type Choices, type Note } from '$lib/domain/lineage';
import { uploadIssue } from '$lib/domain/lineage-codes';
import { delimiterOf, type Delimiter } from './delimiter';
import { decodeText, type Encoding } from './encoding';
import type { Grid, GridRow } from './grid';
import { reject, Rejected } from './rejected';

interface Info {
	readonly lines: number;
}

/** Refuses what is too long before the parser sees it: cheap, and a bound on its memory. */
const measure = (text: string): void => {
	let start = 0;
	let rows = 0;
	while (start <= text.length) {
		let end = text.indexOf('\n', start);
		if (end === -1) end = text.length;
		rows++;
		if (end - start > limits.lineCharacters && !text.slice(start, end).includes('\r'))
			reject('too-long-cell', [rows, limits.lineCharacters], { row: rows });
		start = end + 1;
	}
	if (rows > limits.rows + 2) reject('too-many-rows', [limits.rows]);
};

const quoteFault = (error: CsvError): never => {
	const lines = Number((error as unknown as Info).lines) || 1;
	const what =
		error.code === 'CSV_QUOTE_NOT_CLOSED'
			? 'A quote is opened and never closed'
			: error.code === 'CSV_INVALID_CLOSING_QUOTE'
				? 'Text follows a closing quote'
				: 'A quote stands inside an unquoted field';
	// The parser notices an unclosed quote at the end of the file; the row that opened it is what helps.
	return reject('quote', [lines, what], { row: lines });
};

/** Line of the file on which an unclosed quote was opened. */
const openedAt = (text: string, delimiter: Delimiter): number => {
	let line = 1;
	let opened = 1;
	let quoted = false;
	for (let i = 0; i < text.length; i++) {
		const character = text[i];
		if (character === '"') {
			const before = text[i - 1];
			const starts = i === 0 || before === delimiter || before === '\n' || before === '\r';
			if (!quoted && starts) {
				quoted = true;
				opened = line;
			} else if (quoted && text[i + 1] === '"') i++;
			else quoted = false;
		} else if (character === '\n') line++;
	}
	return opened;
};

const records = (text: string, delimiter: Delimiter): { info: Info; record: string[] }[] => {
	try {
		return parse(text, {
			delimiter,
			record_delimiter: ['\r\n', '\n', '\r'],
			relax_column_count: true,
			skip_empty_lines: true,
			info: true
		}) as unknown as { info: Info; record: string[] }[];
	} catch (error) {
		if (!(error instanceof CsvError)) throw error;
		if (error.code === 'CSV_QUOTE_NOT_CLOSED') {
			const row = openedAt(text, delimiter);
			return reject('quote', [row, 'A quote is opened and never closed'], { row });
		}
		return quoteFault(error);
	}
};

const gridRow = ({ info, record }: { info: Info; record: string[] }): GridRow => {
	const inside = record.reduce((n, field) => n + (field.match(/\r\n|\n|\r/g)?.length ?? 0), 0);
	return { row: info.lines - inside, cells: record };
};

const bounds = (rows: readonly GridRow[]): void => {
	if (rows.length - 1 > limits.rows) reject('too-many-rows', [limits.rows]);
	let cells = 0;
	for (const { row, cells: fields } of rows) {
		if (fields.length > limits.columns) reject('too-many-columns', [limits.columns], { row });
		cells += fields.length;
		for (const field of fields)
			if ((field as string).length > limits.cellCharacters)
				reject('too-long-cell', [row, limits.cellCharacters], { row });
	}
	if (cells > limits.cells) reject('too-many-cells', [limits.cells]);
};

/** A lone carriage return is a line end only in a file whose rows come out even. */
const loneReturn = (text: string, rows: readonly GridRow[]): void => {
	const at = text.search(/\r(?!\n)/);
	if (at === -1 || !text.includes('\n')) return;
	const width = rows[0]?.cells.length ?? 0;
	const uneven = rows.find(({ cells }) => cells.length !== width);
	if (uneven) throw new Rejected([uploadIssue('line-end', [uneven.row], { row: uneven.row })]);
};

/**
 * Reads CSV (RFC 4180: quoted fields, doubled quotes, line breaks inside quotes; LF, CRLF or CR) into a grid of text.
 * @throws Rejected with a code of the closed list.
 */
export const readCsv = (
	bytes: Uint8Array,
	choices: Choices
): { grid: Grid; delimiter: Delimiter; encoding: Encoding } => {
	const { text, encoding } = decodeText(bytes);
	if (text.trim() === '') reject('empty', []);
	measure(text);
	const delimiter = delimiterOf(text, choices.delimiter);
	const rows = records(text, delimiter).map(gridRow);
	bounds(rows);
	if (choices.range === undefined) loneReturn(text, rows);
	const notes: Note[] = [];
	if (encoding !== 'UTF-8') notes.push({ code: 'encoding', message: `Read as ${encoding}.` });
	return { grid: { rows, even: true, merged: [], notes }, delimiter, encoding };
};
