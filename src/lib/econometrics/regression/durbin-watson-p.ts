import { normalCdf } from '../distributions/normal';
import { factorise, applyTransposedQ } from '../linalg/householder';
import { symmetricEigenvalues } from '../linalg/spectrum';
import { weightedSumBelow } from './farebrother';
import type { OlsFit } from './ols';

export interface DurbinWatsonP {
	/** P(DW <= observed): small when the errors are positively autocorrelated. */
	readonly p: number;
	/** `exact` (a series of the given number of nodes) or the normal approximation. */
	readonly by: 'exact' | 'normal';
}

/** Rows from which the normal approximation serves. */
const LARGE = 100;

/**
 * P-value of the Durbin-Watson statistic. Null: no first-order autocorrelation; alternative: a positive one (Durbin &
 * Watson 1951, Biometrika 38, 159-178). Below 100 rows from the eigenvalues of the quadratic forms by Farebrother's
 * series; where 15 nodes leave [0, 1], as lmtest does, the normal approximation. Not valid with a lagged dependent
 * variable.
 */
export function durbinWatsonP(fit: OlsFit, nodes = 15): DurbinWatsonP {
	if (fit.nobs < LARGE) {
		const p = weightedSumBelow(fit.dw, residualEigenvalues(fit), nodes);
		if (p >= 0 && p <= 1) return Object.freeze({ p, by: 'exact' });
	}
	return Object.freeze({ p: normalApproximation(fit), by: 'normal' });
}

/** A v with A tridiagonal: 2 (1 at both ends) on the diagonal, -1 beside it; v'Av is the sum of squared changes. */
function squaredChanges(v: Float64Array): Float64Array {
	const last = v.length - 1;
	return v.map((value, i) => (i > 0 ? value - v[i - 1]! : 0) + (i < last ? value - v[i + 1]! : 0));
}

/** The n-k eigenvalues of M A that belong to the space of residuals: Q2'A Q2, Q2 the complement of the regressors. */
function residualEigenvalues({ nobs: n, k, basis }: OlsFit): number[] {
	const factor = factorise(basis.slice(), n, k);
	const free = n - k;
	const rotated = new Float64Array(n * n);
	for (let j = 0; j < n; j++) {
		const unit = new Float64Array(n);
		unit[j] = 1;
		rotated.set(squaredChanges(unit), j * n);
		applyTransposedQ(factor, rotated, j * n);
	}
	// Q'A in hand; the transpose, rotated once more, is Q'AQ.
	const both = new Float64Array(n * n);
	for (let i = 0; i < n; i++) for (let j = 0; j < n; j++) both[i * n + j] = rotated[j * n + i]!;
	for (let j = 0; j < n; j++) applyTransposedQ(factor, both, j * n);
	const inner = new Float64Array(free * free);
	for (let j = 0; j < free; j++)
		for (let i = 0; i < free; i++) inner[j * free + i] = both[(k + j) * n + k + i]!;
	return symmetricEigenvalues(inner, free).filter((value) => value > 1e-10);
}

/** Normal with the exact mean and variance of DW under the null. */
function normalApproximation({ nobs: n, k, basis, dw }: OlsFit): number {
	const columns = Array.from({ length: k }, (_, j) => basis.slice(j * n, (j + 1) * n));
	const images = columns.map(squaredChanges);
	let trace = 0;
	let images2 = 0;
	let square = 0;
	for (let i = 0; i < k; i++) {
		for (let j = 0; j < k; j++) {
			let product = 0;
			for (let t = 0; t < n; t++) product += columns[i]![t]! * images[j]![t]!;
			if (i === j) trace += product;
			square += product * product;
		}
		for (let t = 0; t < n; t++) images2 += images[i]![t]! ** 2;
	}
	const first = 2 * (n - 1) - trace;
	const second = 2 * (3 * n - 4) - 2 * images2 + square;
	const mean = first / (n - k);
	const variance = (2 / ((n - k) * (n - k + 2))) * (second - first * mean);
	return normalCdf((dw - mean) / Math.sqrt(variance));
}
