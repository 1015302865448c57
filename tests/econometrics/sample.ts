import { isRefusal, type Refusal } from '$lib/econometrics/refusal';
import { drawNormal, mulberry32 } from '$lib/econometrics/random/mulberry32';
import { constant } from '$lib/econometrics/series/deterministic';
import { designOf, type Design, type Regressor } from '$lib/econometrics/series/design';

/** The value, or a failed test that says why there is none. */
export function must<T>(value: T | Refusal): T {
	if (isRefusal(value)) throw new Error(`${value.refused}: ${value.detail}`);
	return value;
}

export interface Sample {
	readonly y: Float64Array;
	readonly design: Design;
}

/** A regression of n rows on a constant, random walks and white noise in turn, k columns in all. */
export function drawSample(seed: number, n: number, k: number): Sample {
	const next = mulberry32(seed);
	const drivers = Array.from({ length: k - 1 }, (_, j): Regressor => {
		let level = 5;
		const column = Float64Array.from({ length: n }, () => {
			const z = drawNormal(next);
			level += z;
			return j % 2 === 0 ? level : z;
		});
		return { name: `x${j + 1}`, column };
	});
	const y = Float64Array.from({ length: n }, (_, t) => {
		const signal = drivers.reduce((sum, d, j) => sum + ((j % 3) - 0.5) * d.column[t]!, 1);
		return signal + 0.5 * drawNormal(next);
	});
	return { y, design: designOf([constant(n), ...drivers]) };
}

/** Rows from..to-1 (0-based) of a sample. */
export const rowsOf = ({ y, design }: Sample, from: number, to: number): Sample => ({
	y: y.slice(from, to),
	design: { names: design.names, columns: design.columns.map((column) => column.slice(from, to)) }
});

/** A sample with one more regressor. */
export const withColumn = ({ y, design }: Sample, name: string, column: Float64Array): Sample => ({
	y,
	design: { names: [...design.names, name], columns: [...design.columns, column] }
});

/** Relative difference of two numbers. */
export const apart = (a: number, b: number): number =>
	a === b ? 0 : Math.abs(a - b) / Math.max(Math.abs(a), Math.abs(b));
