/** Values of a ratio that a test at the given level does not reject. */
export type FiellerSet =
	| { readonly shape: 'interval'; readonly low: number; readonly high: number }
	/** Everything outside (low, high): the denominator may be 0. */
	| { readonly shape: 'outside'; readonly low: number; readonly high: number }
	| { readonly shape: 'everything' };

/** A ratio b / lambda with the variances and the covariance of its parts. */
export interface Ratio {
	readonly b: number;
	readonly lambda: number;
	readonly varB: number;
	readonly varLambda: number;
	readonly covariance: number;
}

/**
 * Fieller's set for b / lambda at the t quantile `quantile`. Outside an interval, or everything, when lambda does
 * not differ from 0 at that level: the long run is then not determined. Fieller (1954) JRSS B 16, 175-185.
 */
export function fiellerSet({ b, lambda, varB, varLambda, covariance }: Ratio, quantile: number): FiellerSet {
	const square = quantile ** 2;
	const A = lambda ** 2 - square * varLambda;
	const B = b * lambda - square * covariance;
	const C = b ** 2 - square * varB;
	const discriminant = B ** 2 - A * C;
	if (A === 0 || discriminant < 0) return Object.freeze({ shape: 'everything' });
	const root = Math.sqrt(discriminant);
	const ends = [(B - root) / A, (B + root) / A].sort((x, y) => x - y) as [number, number];
	return Object.freeze({ shape: A > 0 ? 'interval' : 'outside', low: ends[0], high: ends[1] });
}
