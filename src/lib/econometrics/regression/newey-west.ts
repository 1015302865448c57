import { isRefusal, refuse, type Refusal } from '../refusal';
import type { OlsFit } from './ols';
import { sandwich, type CovarianceEstimate } from './sandwich';

export interface NeweyWest extends CovarianceEstimate {
	readonly lags: number;
	readonly adjusted: boolean;
}

/**
 * Standard errors under unequal variance and autocorrelation: Bartlett weights 1 - l/(lags+1), no prewhitening
 * (Newey & West 1987, Econometrica 55, 703-708). `adjusted` multiplies the covariance by n/(n-k). Refuses `lag`
 * (not a whole number 0 .. n-1) and `no-variance`.
 */
export function neweyWest(fit: OlsFit, lags: number, { adjusted = false } = {}): NeweyWest | Refusal {
	const { nobs: n, k } = fit;
	if (!Number.isInteger(lags) || lags < 0 || lags >= n)
		return refuse('lag', `A truncation lag of ${lags} is not possible with ${n} rows.`);
	const meat = scoreVariance(fit, lags);
	if (adjusted) for (let i = 0; i < meat.length; i++) meat[i]! *= n / (n - k);
	const estimate = sandwich(fit, meat);
	return isRefusal(estimate) ? estimate : Object.freeze({ ...estimate, lags, adjusted });
}

/**
 * Sum of g_t g_t' and of the weighted autocovariances of the scores g_t = q_t e_t, q_t a row of the orthonormal
 * basis: column-major k x k, symmetric. Not divided by n.
 */
export function scoreVariance(fit: OlsFit, lags: number): Float64Array {
	const { nobs: n, k, basis, resid } = fit;
	const scores = basis.map((q, at) => q * resid[at % n]!);
	const s = new Float64Array(k * k);
	for (let a = 0; a < k; a++) {
		for (let b = 0; b <= a; b++) {
			let sum = crossProduct(scores, n, a, b, 0);
			for (let l = 1; l <= lags; l++) {
				const both = crossProduct(scores, n, a, b, l) + crossProduct(scores, n, b, a, l);
				sum += (1 - l / (lags + 1)) * both;
			}
			s[a * k + b] = sum;
			s[b * k + a] = sum;
		}
	}
	return s;
}

/** Sum over t of column a at t times column b at t - l. */
function crossProduct(scores: Float64Array, n: number, a: number, b: number, l: number): number {
	let sum = 0;
	for (let i = l; i < n; i++) sum += scores[a * n + i]! * scores[b * n + i - l]!;
	return sum;
}
