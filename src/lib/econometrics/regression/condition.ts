import { singularValues } from '../linalg/spectrum';
import { norm } from '../linalg/vectors';
import type { LeastSquares } from './least-squares';

/**
 * Scaled condition number of a design: ratio of the extreme singular values of X with columns of unit length, the
 * constant included and nothing centred (Belsley, Kuh & Welsch 1980, Regression Diagnostics: 30 and more is a
 * warning). Taken from Q'X, k x k, so that the rows do not matter.
 */
export function scaledConditionNumber(fit: Pick<LeastSquares, 'nobs' | 'k' | 'basis' | 'design'>): number {
	const { nobs: n, k, basis, design } = fit;
	if (k === 0) return 1;
	const r = new Float64Array(k * k);
	for (const [j, column] of design.columns.entries()) {
		const length = norm(column);
		for (let q = 0; q < k; q++) {
			let product = 0;
			for (let i = 0; i < n; i++) product += basis[q * n + i]! * (column[i]! / length);
			r[j * k + q] = product;
		}
	}
	const values = singularValues(r, k, k);
	return values[0]! / values[k - 1]!;
}
