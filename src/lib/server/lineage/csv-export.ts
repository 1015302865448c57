import { stringify } from 'csv-stringify/sync';

/** Starts that a spreadsheet takes for a formula, also behind blanks and quotes; the wide forms count as well. */
// eslint-disable-next-line no-control-regex -- NUL is one of the starts
const formula = /^[\s"']*[=+\-@\u0000\uff1d\uff0b\uff0d\uff20]|^[\t\r\n]/;

const neutral = (text: string): string => (formula.test(text) ? `'${text}` : text);

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
		// Otherwise only a whole CRLF would be quoted, and a lone line feed would end the record.
		quoted_match: /[\r\n]/,
		cast: { string: neutral, number: String }
	});
