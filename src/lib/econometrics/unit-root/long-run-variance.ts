/**
 * Long-run variance of `e` with Bartlett weights and truncation lag `lag`: no demeaning, divisor n.
 * Newey & West (1987) Econometrica 55, 703-708.
 */
export function longRunVariance(e: Float64Array, lag: number): number {
	let total = autoProduct(e, 0);
	for (let l = 1; l <= lag; l++) total += 2 * (1 - l / (lag + 1)) * autoProduct(e, l);
	return total / e.length;
}

/** Sum of e(t) e(t-l) over t > l. */
export function autoProduct(e: Float64Array, l: number): number {
	let sum = 0;
	for (let t = l; t < e.length; t++) sum += e[t]! * e[t - l]!;
	return sum;
}

const fourthRoot = (x: number): number => Math.sqrt(Math.sqrt(x));

/** The short truncation lag, trunc(4 (n/100)^(1/4)). */
export const shortLag = (n: number): number => Math.trunc(4 * fourthRoot(n / 100));

/** The long truncation lag, trunc(12 (n/100)^(1/4)). */
export const longLag = (n: number): number => Math.trunc(12 * fourthRoot(n / 100));

/**
 * Data-dependent Bartlett lag of Hobijn, Franses & Ooms (2004) Statistica Neerlandica 58, 483-502, at most n - 1.
 */
export function hobijnLag(e: Float64Array): number {
	const n = e.length;
	const first = Math.floor(n ** (2 / 9));
	let s0 = autoProduct(e, 0) / n;
	let s1 = 0;
	for (let i = 1; i <= first; i++) {
		const term = (2 / n) * autoProduct(e, i);
		s0 += term;
		s1 += i * term;
	}
	return Math.min(Math.floor(1.1447 * Math.cbrt((s1 / s0) ** 2) * Math.cbrt(n)), n - 1);
}
