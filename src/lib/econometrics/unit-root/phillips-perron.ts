import { isRefusal, refuse, type Refusal } from '../refusal';
import { leastSquares } from '../regression/least-squares';
import { constant, trend } from '../series/deterministic';
import { designOf, type Regressor } from '../series/design';
import { longRunVariance } from './long-run-variance';
import { mackinnonCritical, mackinnonP, type CriticalValues } from './mackinnon';
import { refuseSeries } from './usable-series';

/** Phillips-Perron test of one series. */
export interface PhillipsPerron {
	readonly det: 'c' | 'ct';
	readonly lag: number;
	readonly nobs: number;
	/** Judged: below the critical value rejects the unit root. */
	readonly zTau: number;
	readonly zAlpha: number;
	readonly rho: number;
	readonly se: number;
	/** Short-run and long-run variance of the residuals. */
	readonly gamma0: number;
	readonly lambda2: number;
	readonly pvalue: number;
	readonly critical: CriticalValues;
}

/**
 * Tests the null of a unit root in `v`, correcting the Dickey-Fuller regression without lags for autocorrelation
 * by a Bartlett window of `lag`. Phillips & Perron (1988) Biometrika 75, 335-346, in the form of Hamilton (1994),
 * Time Series Analysis, 17.6.8 and 17.6.12. Over-sized with negative moving-average errors.
 */
export function phillipsPerron(
	v: Float64Array,
	{ det, lag }: { readonly det: 'c' | 'ct'; readonly lag: number }
): PhillipsPerron | Refusal {
	const refusal = refuseSeries(v);
	if (refusal) return refusal;
	const n = v.length - 1;
	if (!Number.isInteger(lag) || lag < 0 || lag >= n)
		return refuse('lag', `truncation lag ${lag} of ${n} rows`);
	const regressors: Regressor[] = [constant(n)];
	if (det === 'ct') regressors.push(trend(1, n));
	regressors.push({ name: 'level', column: v.slice(0, n) });
	const fit = leastSquares(v.slice(1), designOf(regressors));
	if (isRefusal(fit)) return fit;
	const lambda2 = longRunVariance(fit.resid, lag);
	if (!(lambda2 > 0) || fit.rss <= 1e-20 * fit.tss)
		return refuse('no-variance', `the long-run variance of the residuals at lag ${lag} is not positive`);
	const k = fit.k;
	const rho = fit.coef[k - 1]!;
	const sigma = Math.sqrt(fit.rss / (n - k));
	// The level comes last, so its row of the inverse factor has one entry.
	const se = sigma * Math.abs(fit.inverseFactor[k * k - 1]!);
	const gamma0 = fit.rss / n;
	const spread = (n * se) / sigma;
	const zTau =
		(Math.sqrt(gamma0 / lambda2) * (rho - 1)) / se - ((lambda2 - gamma0) / 2 / Math.sqrt(lambda2)) * spread;
	return Object.freeze({
		det,
		lag,
		nobs: n,
		zTau,
		zAlpha: n * (rho - 1) - ((lambda2 - gamma0) / 2) * spread ** 2,
		rho,
		se,
		gamma0,
		lambda2,
		pvalue: mackinnonP(zTau, det, 1)!,
		critical: mackinnonCritical(det, 1, n)!
	});
}
