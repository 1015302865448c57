import { refuse, type Refusal } from '../refusal';
import { cholesky } from '../linalg/cholesky';
import { solveTransposed } from '../linalg/triangular';
import { ruleOfThumbLag } from '../regression/bandwidth';
import { scoreVariance } from '../regression/newey-west';
import type { OlsFit } from '../regression/ols';
import { hansenP } from './hansen-p';

export interface ScoreSupF {
	readonly from: number;
	readonly to: number;
	readonly lags: number;
	/** Last row (1-based) of the first regime where the statistic is largest. */
	readonly breakIndex: number;
	readonly stat: number;
	readonly p: number;
	/** The statistic at every date from..to. */
	readonly path: Float64Array;
}

/**
 * A break at an unknown date in the presence of autocorrelated errors: cumulated scores S_b of the whole sample, weighted
 * by their Newey-West variance, n S_b' Omega^-1 S_b / (b (n-b)) (Andrews 1993, Econometrica 61, 821-856). It hardly ever
 * rejects below 120 rows: a sign at best. Refuses `empty-trim` and `no-variance`.
 */
export function scoreSupF(fit: OlsFit, trim = 0.15, lags = ruleOfThumbLag(fit.nobs)): ScoreSupF | Refusal {
	const { nobs: n, k, basis, resid } = fit;
	const cut = Math.floor(trim * n);
	const from = Math.max(cut, k + 1);
	const to = Math.min(n - cut, n - k - 1);
	if (from > to)
		return refuse('empty-trim', `With ${n} rows and ${k} coefficients no break date is left after trimming.`);
	const factor = cholesky(scoreVariance(fit, lags), k);
	if (!factor) return refuse('no-variance', 'The long-run variance of the scores is singular.');
	const cumulated = new Float64Array(k);
	const path = new Float64Array(to - from + 1);
	for (let b = 1; b <= to; b++) {
		for (let j = 0; j < k; j++) cumulated[j]! += basis[j * n + b - 1]! * resid[b - 1]!;
		if (b < from) continue;
		const scaled = solveTransposed(factor, k, cumulated);
		// Omega is the score variance over n; the scores of the whole sample sum to 0.
		path[b - from] = (n * n * scaled.reduce((sum, v) => sum + v * v, 0)) / (b * (n - b));
	}
	const stat = Math.max(...path);
	const lambda = ((n - from) * to) / (from * (n - to));
	const p = hansenP('sup', stat, k, lambda, true);
	return Object.freeze({ from, to, lags, breakIndex: from + path.indexOf(stat), stat, p, path });
}
