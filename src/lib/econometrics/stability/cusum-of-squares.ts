import { isRefusal, refuse, type Refusal } from '../refusal';
import type { LeastSquares } from '../regression/least-squares';
import { recursiveResiduals } from './recursive-residuals';
import { tabulatedLevel, type TabulatedLevel } from './tabulated-level';

/** Two-sided levels; the published columns are one-sided. */
export const CUSUMSQ_LEVELS = Object.freeze([0.2, 0.1, 0.05, 0.02, 0.01] as const);

/** Coefficients of the critical values, one column a level (Edgerton & Wells 1994, Oxford Bulletin 56, 355-365). */
const SURFACE = [
	[1.072983, 1.2238734, 1.3581015, 1.5174271, 1.6276236],
	[-0.6698868, -0.6700069, -0.6701218, -0.6702672, -0.6703724],
	[-0.5816458, -0.7351697, -0.8858694, -1.0847745, -1.2365861]
] as const;

/** No exact p-value is published; the level is read off the five critical values. */
export interface CusumOfSquares extends TabulatedLevel {
	/** Largest distance of the path from its mean value line. */
	readonly maxDeviation: number;
	/** Where the largest distance lies: `above` the line (variance fell) or `below` (variance rose). */
	readonly side: 'above' | 'below';
	readonly m: number;
	/** Half-width of the band at the five levels of `CUSUMSQ_LEVELS`, in their order. */
	readonly critical: readonly number[];
	/** Share of the sum of squares reached, j = 1..N; without a change it follows j/N. */
	readonly path: Float64Array;
	/** Row (1-based) of the regression that belongs to j = 1. */
	readonly first: number;
}

/**
 * CUSUM of squares. Null: constant error variance (Brown, Durbin & Evans 1975, JRSS B 37, 149-192). Refuses
 * `first-rows` and `too-short` (fewer than 4 recursive residuals).
 */
export function cusumOfSquares(fit: LeastSquares): CusumOfSquares | Refusal {
	const recursion = recursiveResiduals(fit);
	if (isRefusal(recursion)) return recursion;
	const { w, first } = recursion;
	const n = w.length;
	if (n < 4) return refuse('too-short', `${n} recursive residuals are too few for a band.`);
	const whole = w.reduce((sum, value) => sum + value * value, 0);
	let total = 0;
	const path = w.map((value) => (total += value * value) / whole);
	const distances = path.map((share, j) => share - (j + 1) / n);
	const farthest = distances.reduce((best, d) => (Math.abs(d) > Math.abs(best) ? d : best), 0);
	const maxDeviation = Math.abs(farthest);
	const m = n / 2 - 1;
	const critical = CUSUMSQ_LEVELS.map(
		(_, i) => SURFACE[0][i]! / Math.sqrt(m) + SURFACE[1][i]! / m + SURFACE[2][i]! / m ** 1.5
	);
	return Object.freeze({
		maxDeviation,
		side: farthest >= 0 ? 'above' : 'below',
		m,
		critical: Object.freeze(critical),
		...tabulatedLevel(maxDeviation, critical, CUSUMSQ_LEVELS),
		path,
		first
	});
}
