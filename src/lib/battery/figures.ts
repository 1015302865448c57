/** Figures as sentences write them. */

const minus = '\u2212';
const thin = '\u2009';

const grouped = (digits: string): string => digits.replace(/\B(?=(\d{3})+(?!\d))/g, thin);

/** Three significant digits, trailing zeros kept: 2.27, −4.21, 0.0638, 12 300. */
export const significant = (value: number, digits = 3): string => {
	if (value === 0) return '0';
	const magnitude = Math.abs(value);
	const rounded = Number(magnitude.toPrecision(digits));
	const sign = value < 0 ? minus : '';
	if (rounded >= 10 ** digits) return sign + grouped(rounded.toFixed(0));
	if (rounded < 1e-6) return sign + magnitude.toExponential(digits - 1).replace('e-', `e${minus}`);
	return sign + magnitude.toPrecision(digits);
};

/** A p-value with its sign: `p = 0.064`, `p < 0.001`. */
export const pFigure = (p: number): string => (p < 0.001 ? 'p < 0.001' : `p = ${p.toFixed(3)}`);

/** A share as a percentage: 0.05 is `5 %`. */
export const percent = (share: number): string => `${Number((100 * share).toPrecision(3))} %`;

/** `1 row`, `2 rows`. */
export const counted = (n: number, one: string, many = `${one}s`): string =>
	`${grouped(String(n))} ${n === 1 ? one : many}`;
