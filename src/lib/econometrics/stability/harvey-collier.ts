import { isRefusal, refuse, type Refusal } from '../refusal';
import { studentTTwoSided } from '../distributions/student-t';
import { centred, mean, sumOfSquares } from '../linalg/vectors';
import type { LeastSquares } from '../regression/least-squares';
import { recursiveResiduals } from './recursive-residuals';

export interface HarveyCollier {
	readonly t: number;
	readonly df: number;
	/** Two-sided. */
	readonly p: number;
}

/**
 * Harvey-Collier test. Null: the recursive residuals have mean 0, as they do when the form is linear and nothing drifts
 * (Harvey & Collier 1977, Journal of Econometrics 6, 103-119). Refuses `first-rows`, `too-short`, `no-variance`.
 */
export function harveyCollier(fit: LeastSquares): HarveyCollier | Refusal {
	const recursion = recursiveResiduals(fit);
	if (isRefusal(recursion)) return recursion;
	const { w } = recursion;
	const n = w.length;
	if (n < 2) return refuse('too-short', 'One recursive residual has no spread.');
	const spread = Math.sqrt(sumOfSquares(centred(w)) / (n - 1));
	if (spread === 0) return refuse('no-variance', 'The recursive residuals do not vary.');
	const t = mean(w) / (spread / Math.sqrt(n));
	return Object.freeze({ t, df: n - 1, p: studentTTwoSided(t, n - 1) });
}
