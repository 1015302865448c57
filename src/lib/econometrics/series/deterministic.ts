import type { Regressor } from './design';

/** Deterministic regressors over rows t = first .. first+n-1, t counted from 1 at the start of the sample. */

export const constant = (n: number): Regressor => ({ name: 'const', column: new Float64Array(n).fill(1) });

/** The trend equals t; it is not counted afresh in a regression that starts later. */
export const trend = (first: number, n: number): Regressor => ({
	name: 'trend',
	column: Float64Array.from({ length: n }, (_, i) => first + i)
});

/**
 * Seasonal dummies s1 .. s(f-1): s_j is 1 in period j of the year; the last period of the year is the base.
 * `firstOfYear` is the place of the first row within its year, 1..f.
 */
export function seasonalDummies(perYear: number, firstOfYear: number, n: number): Regressor[] {
	return Array.from({ length: perYear - 1 }, (_, j) => ({
		name: `s${j + 1}`,
		column: Float64Array.from({ length: n }, (_, i) => ((firstOfYear - 1 + i) % perYear === j ? 1 : 0))
	}));
}

/** 1 in rows from..to (0-based, inclusive), 0 elsewhere: a pulse, or a step when `to` is the last row. */
export const indicator = (name: string, from: number, to: number, n: number): Regressor => ({
	name,
	column: Float64Array.from({ length: n }, (_, i) => (i >= from && i <= to ? 1 : 0))
});
