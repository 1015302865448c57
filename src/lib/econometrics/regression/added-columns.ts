import { refuse, type Refusal } from '../refusal';
import { factorise, thinQ } from '../linalg/householder';
import { coordinates, projectOff } from '../linalg/orthogonal';
import { norm, sumOfSquares } from '../linalg/vectors';
import type { LeastSquares } from './least-squares';

const RANK_LIMIT = 1e-10;

/**
 * By how much the residual sum of squares of a regression falls when columns are added: the added columns are
 * projected off the basis at hand (twice, so that they stay orthogonal to it) instead of fitting all again. Refuses
 * `constant` for a column of zeros and `rank` when an added column lies in the span of what is there.
 */
export function addedColumns(
	fit: LeastSquares,
	added: readonly Float64Array[],
	what: string
): number | Refusal {
	const { nobs: n, k, basis, resid } = fit;
	const m = added.length;
	const matrix = new Float64Array(n * m);
	for (const [j, column] of added.entries()) {
		const length = norm(column);
		if (length === 0) return refuse('constant', `${what} are all 0.`);
		const part = matrix.subarray(j * n, (j + 1) * n);
		for (let i = 0; i < n; i++) part[i] = column[i]! / length;
		projectOff(basis, n, k, part);
		projectOff(basis, n, k, part);
	}
	if (n < m) return refuse('too-short', `${n} rows are too few for ${what}.`);
	const factor = factorise(matrix, n, m);
	if (factor.diagonal.some((d) => Math.abs(d) <= RANK_LIMIT))
		return refuse('rank', `${what} are a linear combination of the regressors.`);
	return sumOfSquares(coordinates(thinQ(factor), n, m, resid));
}
