import type { Equation, Sample } from '$lib/econometrics/error-correction/equation';
import { drawNormal, mulberry32 } from '$lib/econometrics/random/mulberry32';
import { isRefusal, type Refusal } from '$lib/econometrics/refusal';

/** The value, or a failure that names the refusal. */
export function made<T>(value: T | Refusal): T {
	if (isRefusal(value)) throw new Error(`refused ${value.refused}: ${value.detail}`);
	return value;
}

/** The reason a computation was refused, or `made` when it was not. */
export const reasonOf = (value: unknown): string => (isRefusal(value) ? value.refused : 'made');

export function noise(seed: number, n: number): Float64Array {
	const uniform = mulberry32(seed);
	return Float64Array.from({ length: n }, () => drawNormal(uniform));
}

export function cumulated(steps: Float64Array): Float64Array {
	let level = 0;
	return steps.map((step) => (level += step));
}

export const randomWalk = (seed: number, n: number): Float64Array => cumulated(noise(seed, n));

/**
 * y pulled towards 1 + 0.8 a - 0.3 b at `speed` a period, a and b random walks, one lag of dy (0.2) and the change of
 * a now (0.4).
 */
export function correctingSample(seed: number, T: number, speed = 0.3): Sample {
	const a = randomWalk(seed, T);
	const b = randomWalk(seed + 1, T);
	const e = noise(seed + 2, T);
	const y = new Float64Array(T);
	y[0] = 1 + 0.8 * a[0]! - 0.3 * b[0]!;
	for (let t = 1; t < T; t++) {
		const gap = y[t - 1]! - 1 - 0.8 * a[t - 1]! + 0.3 * b[t - 1]!;
		const momentum = t > 1 ? 0.2 * (y[t - 1]! - y[t - 2]!) : 0;
		y[t] = y[t - 1]! - speed * gap + momentum + 0.4 * (a[t]! - a[t - 1]!) + 0.3 * e[t]!;
	}
	return {
		T,
		series: new Map([
			['loans', y],
			['a', a],
			['b', b]
		])
	};
}

/** loans on a and b, one lag of its own change, changes of both drivers now. */
export const equation: Equation = {
	dependent: 'loans',
	longRun: { drivers: ['a', 'b'], constant: true, trend: false },
	shortRun: {
		own: [1],
		drivers: [
			{ series: 'a', lags: [0] },
			{ series: 'b', lags: [0] }
		],
		constant: true
	},
	dummies: [],
	fixed: []
};
