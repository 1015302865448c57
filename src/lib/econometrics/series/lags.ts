import type { Regressor } from './design';

/** Differences and lags of a complete series; no row is ever filled in. */

/** v_2 - v_1, .., v_T - v_(T-1): one value fewer. */
export const difference = (v: Float64Array): Float64Array =>
	Float64Array.from({ length: Math.max(0, v.length - 1) }, (_, i) => v[i + 1]! - v[i]!);

/** v at rows from..to of the series (0-based, inclusive), each taken `by` rows earlier. */
export const lagged = (v: Float64Array, by: number, from: number, to: number): Float64Array =>
	v.slice(from - by, to - by + 1);

/** The change of v at rows from..to (0-based, inclusive), each taken `by` rows earlier. */
export const laggedDifference = (v: Float64Array, by: number, from: number, to: number): Float64Array =>
	Float64Array.from({ length: to - from + 1 }, (_, i) => v[from + i - by]! - v[from + i - by - 1]!);

/** Regressor `<name>.l<by>`: the level, lagged. */
export const levelLag = (name: string, v: Float64Array, by: number, from: number, to: number): Regressor => ({
	name: `${name}.l${by}`,
	column: lagged(v, by, from, to)
});

/** Regressor `d.<name>.l<by>`: the change, lagged. */
export const differenceLag = (
	name: string,
	v: Float64Array,
	by: number,
	from: number,
	to: number
): Regressor => ({
	name: `d.${name}.l${by}`,
	column: laggedDifference(v, by, from, to)
});
