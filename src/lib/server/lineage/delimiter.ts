import { parse } from 'csv-parse/sync';
import type { Choices } from '$lib/domain/lineage';
import { readPeriod } from './period-text';
import { reject } from './rejected';

export type Delimiter = NonNullable<Choices['delimiter']>;

const candidates: readonly Delimiter[] = [',', ';', '\t', '|'];

const words: Readonly<Record<Delimiter, string>> = {
	',': 'comma',
	';': 'semicolon',
	'\t': 'tab',
	'|': 'vertical bar'
};

const sampleLines = 200;
/** Enough lines to judge by, unless they are very long; the sample is parsed once for each candidate. */
const sampleCharacters = 256 * 1024;

/** The first 200 lines, fewer where they are long, counting line ends outside of quotes only. */
const sample = (text: string): string => {
	let quoted = false;
	let lines = 0;
	let end = 0;
	for (let i = 0; i < text.length; i++) {
		const character = text[i];
		if (character === '"') quoted = !quoted;
		else if (!quoted && (character === '\n' || (character === '\r' && text[i + 1] !== '\n'))) {
			end = i;
			if (++lines === sampleLines) break;
		}
		if (i > sampleCharacters && lines > 1) break;
		if (i === text.length - 1) end = text.length;
	}
	return text.slice(0, end);
};

const records = (text: string, delimiter: Delimiter): string[][] | undefined => {
	try {
		return parse(text, {
			delimiter,
			record_delimiter: ['\r\n', '\n', '\r'],
			relax_column_count: true,
			relax_quotes: true,
			skip_empty_lines: true
		});
	} catch {
		return undefined;
	}
};

interface Candidate {
	readonly delimiter: Delimiter;
	readonly width: number;
	readonly share: number;
	readonly header: number;
	readonly periods: boolean;
}

const measure = (text: string, delimiter: Delimiter): Candidate | undefined => {
	const rows = records(text, delimiter);
	const header = rows?.[0];
	if (!rows || !header) return undefined;
	const counts = new Map<number, number>();
	for (const row of rows) counts.set(row.length, (counts.get(row.length) ?? 0) + 1);
	const [width, n] = [...counts].sort((a, b) => b[1] - a[1] || b[0] - a[0])[0]!;
	const body = rows.slice(1);
	const periods = body.length > 0 && body.every((row) => readPeriod(row[0] ?? '').kind !== 'fault');
	return { delimiter, width, share: n / rows.length, header: header.length, periods };
};

/**
 * The delimiter that gives the header and at least 95 in 100 of the first 200 lines the same number of fields, two or
 * more. Where several do, the one that leaves a period in front of each line; where that does not settle it, the
 * uploader chooses.
 */
export const delimiterOf = (text: string, chosen?: Delimiter): Delimiter => {
	if (chosen) return chosen;
	const head = sample(text);
	const measured = candidates.flatMap((delimiter) => measure(head, delimiter) ?? []);
	const fitting = measured.filter(
		({ width, share, header }) => width >= 2 && share >= 0.95 && header === width
	);
	if (fitting.length === 1) return fitting[0]!.delimiter;
	if (fitting.length > 1) {
		const leading = fitting.filter(({ periods }) => periods);
		if (leading.length === 1) return leading[0]!.delimiter;
		return reject('delimiter', [], { row: 1 }, [
			{
				choice: 'delimiter',
				options: fitting.map(({ delimiter, width }) => ({
					value: delimiter,
					label: `${words[delimiter]}: ${width} columns`
				}))
			}
		]);
	}
	// Uneven rows: the most frequent one in the first line that has any, so that the message names rows and not the delimiter.
	const lines = head.split(/\r\n|\n|\r/, sampleLines);
	for (const line of lines) {
		const counts = candidates.map((delimiter) => ({ delimiter, n: line.split(delimiter).length - 1 }));
		const best = counts.reduce((a, b) => (b.n > a.n ? b : a));
		if (best.n > 0) return best.delimiter;
	}
	return reject('not-a-table', ['text without columns']);
};
