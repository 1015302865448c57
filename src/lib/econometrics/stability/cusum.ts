import { isRefusal, refuse, type Refusal } from '../refusal';
import { normalCdf, normalSf } from '../distributions/normal';
import type { OlsFit } from '../regression/ols';
import { centred, sumOfSquares } from '../linalg/vectors';
import { recursiveResiduals } from './recursive-residuals';

/** Slopes a of the boundary +-a (1 + 2 j/N) (Brown, Durbin & Evans 1975, JRSS B 37, 149-192). */
export const CUSUM_BOUNDARY = Object.freeze({ '10%': 0.85, '5%': 0.948, '1%': 1.143 });

export interface Cusum {
	/** Largest |W_j|/(1 + 2 j/N); to be held against the slopes of the boundary. */
	readonly stat: number;
	readonly p: number;
	/** The same with the standard error of the regression in place of the spread of the recursive residuals. */
	readonly statOlsSigma: number;
	readonly pOlsSigma: number;
	readonly crosses5: boolean;
	/** Largest |cumulated recursive residual| in units of their spread, without the root of N. */
	readonly maxAbs: number;
	/** W_j, j = 1..N: cumulated recursive residuals over their spread and the root of N. */
	readonly path: Float64Array;
	/** 1 + 2 j/N, j = 1..N: times a slope of the boundary this is the bound at j. */
	readonly bound: Float64Array;
	/** Row (1-based) of the regression that belongs to j = 1. */
	readonly first: number;
}

/**
 * CUSUM of recursive residuals. Null: constant coefficients. Spread with divisor N-1 (strucchange); also valid with a
 * lagged dependent variable (Kraemer, Ploberger & Alt 1988, Econometrica 56, 1355-1369). It has no power against late
 * breaks nor against breaks orthogonal to the mean regressor. Refuses `first-rows` and `too-short`.
 */
export function cusum(fit: OlsFit): Cusum | Refusal {
	const recursion = recursiveResiduals(fit);
	if (isRefusal(recursion)) return recursion;
	const { w, first } = recursion;
	const n = w.length;
	if (n < 2) return refuse('too-short', 'One recursive residual has no spread.');
	const spread = Math.sqrt(sumOfSquares(centred(w)) / (n - 1));
	if (spread === 0) return refuse('no-variance', 'The recursive residuals do not vary.');
	const bound = Float64Array.from({ length: n }, (_, j) => 1 + (2 * (j + 1)) / n);
	let total = 0;
	const path = w.map((value) => (total += value) / (spread * Math.sqrt(n)));
	const stat = Math.max(...path.map((value, j) => Math.abs(value) / bound[j]!));
	const statOlsSigma = (stat * spread) / fit.sigma;
	return Object.freeze({
		stat,
		p: cusumP(stat),
		statOlsSigma,
		pOlsSigma: cusumP(statOlsSigma),
		crosses5: stat > CUSUM_BOUNDARY['5%'],
		maxAbs: Math.max(...path.map(Math.abs)) * Math.sqrt(n),
		path,
		bound,
		first
	});
}

/** P-value of the largest |W_j|/(1 + 2 j/N), as in strucchange (Zeileis 2004 after Brown, Durbin & Evans 1975). */
export function cusumP(x: number): number {
	if (x < 0.3) return 1 - 0.1465 * x;
	const crossing = Math.exp(-4 * x * x) * (normalCdf(x) - normalSf(5 * x));
	return 2 * (normalSf(3 * x) + crossing - Math.exp(-16 * x * x) * normalSf(x));
}
