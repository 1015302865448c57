import { appendRow, emptyTriangle } from '../linalg/givens';
import type { LeastSquares } from '../regression/least-squares';

/** One-step residuals of a regression as its rows come in one after the other. */
export interface RowRecursion {
	/** w of each row in the order of arrival; 0 for rows that only bring new directions. */
	readonly w: Float64Array;
	/** Residual sum of squares of the rows up to and including each. */
	readonly rss: Float64Array;
}

/**
 * Runs through the rows forwards or backwards. Recursive residuals do not change when the columns are replaced by an
 * orthonormal basis of them and y by its residuals from the whole sample; both are better scaled than the data.
 */
export function recurse(fit: LeastSquares, direction: 'forward' | 'backward'): RowRecursion {
	const { nobs: n, k, basis, resid } = fit;
	const triangle = emptyTriangle(k);
	const row = new Float64Array(k);
	const w = new Float64Array(n);
	const rss = new Float64Array(n);
	let total = 0;
	for (let step = 0; step < n; step++) {
		const i = direction === 'forward' ? step : n - 1 - step;
		for (let j = 0; j < k; j++) row[j] = basis[j * n + i]!;
		w[step] = appendRow(triangle, row, resid[i]!);
		total += w[step]! ** 2;
		rss[step] = total;
	}
	return { w, rss };
}
