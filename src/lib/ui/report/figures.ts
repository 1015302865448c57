/** How the report writes figures of one column: equal decimals where they can be read, digits where they cannot. */
import { formatNumber, formatP, formatSignificant, MINUS, NO_BREAK } from '../format';

/** Digits after the point that no table exceeds. */
const mostDecimals = 8;
/** Normal quantile of a 95 % interval. */
export const normal95 = 1.959964;

/** A figure at the column's decimals; one that would round to zero keeps two digits instead. */
export function figure(value: number, decimals = 3): string {
	const vanishes = value !== 0 && Math.abs(value) < 0.5 * 10 ** -decimals;
	return vanishes ? formatSignificant(value, 2) : formatNumber(value, { decimals });
}

/** A statistic or parameter: three decimals, below 0.1 three digits, a whole number as it is. */
export function reading(value: number): string {
	if (Number.isInteger(value)) return formatNumber(value, { decimals: 0 });
	return Math.abs(value) < 0.1 ? formatSignificant(value, 3) : formatNumber(value, { decimals: 3 });
}

/** Decimals at which the smallest of some errors still shows so many digits, from 3 to 8. */
export function decimalsFor(errors: readonly (number | null | undefined)[], digits: number): number {
	const sizes = errors.map((error) => Math.abs(error ?? 0)).filter((size) => size > 0);
	if (sizes.length === 0) return 3;
	const needed = digits - 1 - Math.floor(Math.log10(Math.min(...sizes)));
	return Math.min(mostDecimals, Math.max(3, needed));
}

/** A p-value, or the bracket that is all that is known of it. */
export function pWords(of: { readonly pValue?: number; readonly pText?: string }): string | null {
	if (of.pValue !== undefined) return formatP(of.pValue);
	return of.pText === undefined ? null : of.pText.replaceAll(' ', NO_BREAK);
}

/** A number as a person typed it, with the true minus sign. */
export function typed(text: string): string {
	return text.replace('-', MINUS);
}

/** Figures of unequal decimals, padded on the right so that their points stand below each other. */
export function aligned(texts: readonly string[]): readonly string[] {
	const tail = (text: string): number => (text.includes('.') ? text.length - text.indexOf('.') : 0);
	const longest = Math.max(0, ...texts.map(tail));
	return texts.map((text) => text + NO_BREAK.repeat(longest - tail(text)));
}

/** A sentence whose figures are not torn from their signs and names: `p = 0.064`, `5 %`, `n = 86`. */
export function tied(sentence: string): string {
	return sentence
		.replaceAll(/ ([=<>]) /g, `${NO_BREAK}$1${NO_BREAK}`)
		.replaceAll(/(?<=\d) %/g, `${NO_BREAK}%`);
}

/** The first digits of a digest, by which people compare. */
export function digestStart(digest: string): string {
	return digest.replace(/^(sha256:[0-9a-f]{12}).*$/, '$1…');
}

const ordinals = [
	'first',
	'second',
	'third',
	'fourth',
	'fifth',
	'sixth',
	'seventh',
	'eighth',
	'ninth',
	'tenth'
];

/** `third`, `12th`. */
export function ordinalWord(n: number): string {
	const word = ordinals[n - 1];
	if (word !== undefined) return word;
	const last = n % 100 >= 11 && n % 100 <= 13 ? 0 : n % 10;
	return `${n}${{ 1: 'st', 2: 'nd', 3: 'rd' }[last] ?? 'th'}`;
}
