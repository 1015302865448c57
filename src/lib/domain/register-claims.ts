import type { Issue } from './faults';
import { foldTerm, spellings, termName } from './register-term-names';
import { termsOf } from './specification-terms';
import type { Specification } from './specification';

/** A claimed coefficient: its digits as typed, with an ordinary minus and point. */
export interface ClaimedCoefficient {
	readonly term: string;
	readonly value: string;
	readonly se?: string;
}

/** What a pasted table was read as. Nothing is taken when `issues` is not empty. */
export interface PastedClaims {
	readonly coefficients: readonly ClaimedCoefficient[];
	/** What was read in another way than it was typed, in words, once a kind. */
	readonly notes: readonly string[];
	/** What could not be read: row and column of the pasted table. */
	readonly issues: readonly Issue[];
}

interface Line {
	readonly row: number;
	readonly cells: readonly string[];
}

const headerWord = /^(?:term|coefficient|coef\.?|variable|regressor|name|parameter)$/i;
const numeric = /^[+-]?(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d{1,3})?$/;
/** Roughly a number, for telling where a name with blanks ends. */
const number = String.raw`[+\-\u2212\u2013]?[\d.][\d.,]*(?:[eE][+\-\u2212]?\d+)?`;
const numberLike = new RegExp(`^(?:${number}|\\(${number}\\)|\\[${number}\\])\\*{0,4}$`);

const splitSpaces = (line: string): string[] => {
	const words = line.trim().split(/\s+/);
	let first = words.length;
	while (first > 0 && numberLike.test(words[first - 1]!)) first -= 1;
	return [words.slice(0, first).join(' '), ...words.slice(first)];
};

type Separator = 'tab' | 'semicolon' | 'comma' | 'space';

const separatorOf = (text: string): Separator => {
	if (text.includes('\t')) return 'tab';
	if (text.includes(';')) return 'semicolon';
	// A comma between digits only is a decimal comma of a table set with blanks.
	return /(?:^|\n)[^\n]*[^\d\s,][^\n,]*,[^\n]*/.test(text) ? 'comma' : 'space';
};

const readers: Readonly<Record<Separator, (line: string) => string[]>> = {
	tab: (line) => line.split('\t'),
	semicolon: (line) => line.split(';'),
	comma: (line) => line.split(','),
	space: splitSpaces
};

const linesOf = (text: string, separator: Separator): Line[] =>
	text
		.split(/\r\n|\r|\n/)
		.map((line, index) => ({ row: index + 1, line }))
		.filter(({ line }) => line.trim() !== '')
		.map(({ row, line }) => {
			const cells = readers[separator](line.replace(/(\d|\))\s+(\*+)/g, '$1$2')).map((cell) =>
				cell
					.trim()
					.replace(/^"(.*)"$/, '$1')
					.trim()
			);
			while (cells.length > 1 && cells[cells.length - 1] === '') cells.pop();
			return { row, cells };
		});

interface Read {
	readonly text?: string;
	readonly notes: readonly string[];
	readonly fault?: string;
}

/** Reads one number, saying what was changed; the digits stay as typed. */
export const readClaimedNumber = (cell: string, separator: Separator): Read => {
	const notes: string[] = [];
	let text = cell;
	const change = (pattern: RegExp, by: string, note: string): void => {
		const changed = text.replace(pattern, by);
		if (changed !== text) notes.push(note);
		text = changed;
	};
	change(/\*+$/, '', 'Stars after a number were left out.');
	change(/^[([](.*)[)\]]$/, '$1', 'Brackets around a number were left out: it was read as a standard error.');
	change(/\*+$/, '', 'Stars after a number were left out.');
	change(/^[\u2212\u2013]/, '-', 'A typographic minus was read as a minus.');
	change(/([eE])[\u2212\u2013]/, '$1-', 'A typographic minus was read as a minus.');
	if (/^[+-]?\d*,\d+$/.test(text)) {
		if (separator === 'comma')
			return { notes, fault: 'A decimal comma needs tabs or semicolons between the columns.' };
		change(/,/, '.', 'A decimal comma was read as a decimal point.');
	}
	if (!numeric.test(text)) return { notes, fault: `"${cell}" is not a number: write it as in -0.1870.` };
	if (!Number.isFinite(Number(text)))
		return { notes, fault: `"${cell}" lies beyond what a number can hold.` };
	return { text, notes };
};

const bracketed = (cell: string | undefined): boolean => /^[([].*[)\]]\*{0,4}$/.test(cell ?? '');

/** A line that holds a bracketed number only gives the standard error of the line above. */
const joinErrorsBelow = (lines: readonly Line[]): Line[] =>
	lines.reduce<Line[]>((joined, line) => {
		const above = joined[joined.length - 1];
		const filled = line.cells.filter((cell) => cell !== '');
		const below = filled.length === 1 && bracketed(filled[0]) && above?.cells.length === 2;
		if (!below) return [...joined, line];
		return [...joined.slice(0, -1), { row: above.row, cells: [...above.cells, filled[0]!] }];
	}, []);

const candidates = (specification: Specification): ((typed: string) => { code?: string; fault?: string }) => {
	const terms = termsOf(specification);
	const names = terms.map(termName).join(', ');
	const keyed = terms.map((term) => ({ code: term.code, keys: spellings(term) }));
	const match = (typed: string, alike: (key: string) => string): string[] => {
		const key = alike(foldTerm(typed));
		return keyed.filter(({ keys }) => keys.some((each) => alike(each) === key)).map(({ code }) => code);
	};
	return (typed) => {
		const exact = match(typed, (key) => key);
		const found = exact.length ? exact : match(typed, (key) => key.toLowerCase());
		if (found.length === 1) return { code: found[0]! };
		if (found.length > 1) return { fault: `"${typed}" could be several terms: write one of ${names}.` };
		return { fault: `"${typed}" is no term of this equation: it has ${names}.` };
	};
};

const columns = ['term', 'value', 'standard error'] as const;

/**
 * Reads a pasted table `term  value  standard error` (tabs, blanks, commas or semicolons; with or without a header; the
 * standard error may stand in brackets, also on the line below). Terms may be typeset (`Δunemp(t−1)`) or coded.
 */
export const parseClaims = (text: string, specification: Specification): PastedClaims => {
	const separator = separatorOf(text);
	const lines = joinErrorsBelow(linesOf(text, separator));
	const body = lines[0] && headerWord.test(lines[0].cells[0]!) ? lines.slice(1) : lines;
	const termOf = candidates(specification);
	const issues: Issue[] = [];
	const notes = new Set<string>();
	const coefficients: ClaimedCoefficient[] = [];
	const seen = new Map<string, number>();
	for (const { row, cells } of body) {
		const wrong = (column: number, message: string): void => {
			issues.push({
				pointer: '/claimed',
				message: `Line ${row}, ${columns[column] ?? `column ${column + 1}`}: ${message}`,
				row,
				column: columns[column] ?? String(column + 1)
			});
		};
		const number = (column: number): string | undefined => {
			const read = readClaimedNumber(cells[column] ?? '', separator);
			if (read.fault !== undefined) return void wrong(column, read.fault);
			read.notes.forEach((note) => notes.add(note));
			return read.text;
		};
		const { code, fault } = termOf(cells[0]!);
		if (fault !== undefined) wrong(0, fault);
		const before = code === undefined ? undefined : seen.get(code);
		if (before !== undefined) wrong(0, `"${cells[0]}" stands here twice: first on line ${before}.`);
		if (code !== undefined && before === undefined) seen.set(code, row);
		if (cells.length > 3)
			wrong(3, 'Three columns are read: term, value, standard error. Take the others out.');
		if (cells.length > 1 && bracketed(cells[1]))
			wrong(1, 'A bracketed number is read as a standard error: the value is missing.');
		const value = number(1);
		const se = cells[2] === undefined || cells[2] === '' ? undefined : number(2);
		if (se !== undefined && !(Number(se) >= 0)) wrong(2, 'A standard error is not negative.');
		if (code !== undefined && value !== undefined)
			coefficients.push({ term: code, value, ...(se !== undefined && { se }) });
	}
	if (body.length === 0)
		issues.push({ pointer: '/claimed', message: 'The table is empty: paste one line a coefficient.' });
	return Object.freeze({ coefficients: issues.length ? [] : coefficients, notes: [...notes], issues });
};
