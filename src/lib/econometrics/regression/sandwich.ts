import { refuse, type Refusal } from '../refusal';
import { studentTTwoSided } from '../distributions/student-t';
import type { OlsFit } from './ols';

/** Standard errors from another covariance of the same estimates. Arrays follow the order of the fit's names. */
export interface CovarianceEstimate {
	/** Column-major k x k. */
	readonly vcov: Float64Array;
	readonly se: Float64Array;
	readonly t: Float64Array;
	/** Two-sided, Student's t with nobs - k degrees of freedom. */
	readonly p: Float64Array;
}

/**
 * G M G' for the meat M, given in the coordinates of the orthonormal basis (column-major k x k): with X = Q G^-1 this is
 * A (X'WX) A, A = (X'X)^-1, formed without an inverse. Refuses `no-variance` when a variance is not positive.
 */
export function sandwich(fit: OlsFit, meat: Float64Array): CovarianceEstimate | Refusal {
	const { k, inverseFactor: g } = fit;
	const half = product(g, meat, k, false);
	const vcov = product(half, g, k, true);
	const se = new Float64Array(k);
	for (let j = 0; j < k; j++) {
		const variance = vcov[j * k + j]!;
		if (!(variance > 0))
			return refuse('no-variance', `The variance of the coefficient of ${fit.names[j]} is not positive.`);
		se[j] = Math.sqrt(variance);
	}
	const t = fit.coef.map((b, j) => b / se[j]!);
	const p = t.map((value) => studentTTwoSided(value, fit.nobs - k));
	return Object.freeze({ vcov, se, t, p });
}

/** A B, or A B' when `transposed`; column-major k x k. */
function product(a: Float64Array, b: Float64Array, k: number, transposed: boolean): Float64Array {
	const c = new Float64Array(k * k);
	for (let j = 0; j < k; j++) {
		for (let l = 0; l < k; l++) {
			const factor = transposed ? b[l * k + j]! : b[j * k + l]!;
			for (let i = 0; i < k; i++) c[j * k + i]! += a[l * k + i]! * factor;
		}
	}
	return c;
}
