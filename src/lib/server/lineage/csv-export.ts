import { stringify } from 'csv-stringify/sync';

/**
 * Rows as CSV (RFC 4180): UTF-8 with byte order mark, CRLF. Text that a spreadsheet would take for a formula gets a
 * leading apostrophe; numbers stay numbers, also negative ones.
 */
export const csvOf = (
	header: readonly string[],
	rows: readonly (readonly (string | number | null)[])[]
): string =>
	stringify([header, ...rows] as unknown[][], {
		bom: true,
		record_delimiter: '\r\n',
		escape_formulas: true,
		cast: { number: (value) => ({ value: String(value), escape_formulas: false }) }
	});
