import { incompleteGamma } from './incomplete-gamma';
import { logPoissonMass } from './saddle-point';
import { normalUpperQuantile } from './normal';
import { solveTail } from './solve-tail';

/** The gamma distribution with shape > 0 and scale > 0 (Johnson, Kotz & Balakrishnan 1994, chapter 17). */

/** P(X <= x). */
export const gammaCdf = (x: number, shape: number, scale: number): number =>
	Math.exp(incompleteGamma(shape, x / scale).lower);

/** P(X > x). */
export const gammaSf = (x: number, shape: number, scale: number): number =>
	Math.exp(incompleteGamma(shape, x / scale).upper);

/** log P(X > x), finite where P itself is below the smallest double. */
export const gammaLogSf = (x: number, shape: number, scale: number): number =>
	incompleteGamma(shape, x / scale).upper;

/** The x with P(X <= x) = p, 0 <= p <= 1. */
export function gammaQuantile(p: number, shape: number, scale: number): number {
	if (p <= 0) return 0;
	if (p >= 1) return Infinity;
	return scale * (p <= 0.5 ? lowerRoot(p, shape) : upperRoot(1 - p, shape));
}

/** The x with P(X > x) = q, 0 <= q <= 1; keeps its digits for tiny q. */
export function gammaUpperQuantile(q: number, shape: number, scale: number): number {
	if (q <= 0) return Infinity;
	if (q >= 1) return 0;
	return scale * (q <= 0.5 ? upperRoot(q, shape) : lowerRoot(1 - q, shape));
}

const lowerRoot = (p: number, shape: number): number =>
	solveTail(Math.log(p), 1, start(normalUpperQuantile(1 - p), shape), (x) => ({
		logTail: incompleteGamma(shape, x).lower,
		logDensity: Math.log(shape) + logPoissonMass(shape, x)
	}));

const upperRoot = (q: number, shape: number): number =>
	solveTail(Math.log(q), -1, start(normalUpperQuantile(q), shape), (x) => ({
		logTail: incompleteGamma(shape, x).upper,
		logDensity: Math.log(shape) + logPoissonMass(shape, x)
	}));

/** Wilson & Hilferty (1931): the cube root of a chi-square is nearly normal. */
function start(z: number, shape: number): number {
	const ninth = 1 / (9 * shape);
	const root = 1 - ninth + z * Math.sqrt(ninth);
	return root > 0.1 ? shape * root ** 3 : shape * 1e-3;
}
