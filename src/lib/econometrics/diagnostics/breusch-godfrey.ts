import { isRefusal, refuse, type Refusal } from '../refusal';
import { chiSquareSf } from '../distributions/chi-square';
import { fSf } from '../distributions/f';
import { addedColumns } from '../regression/added-columns';
import type { OlsFit } from '../regression/ols';

export interface BreuschGodfrey {
	readonly order: number;
	readonly lm: number;
	/** Chi-square with `order` degrees of freedom. */
	readonly lmP: number;
	readonly f: number;
	readonly fP: number;
	readonly df1: number;
	readonly df2: number;
}

/**
 * Breusch-Godfrey test. Null: the errors are not autocorrelated up to `order`. The residuals are regressed on the
 * regressors and their own lags, the lags before the first row being 0 (Breusch 1978, Australian Economic Papers 17,
 * 334-355; Godfrey 1978, Econometrica 46, 1293-1301). Refuses `lag`, `too-short`, `rank`.
 */
export function breuschGodfrey(fit: OlsFit, order: number): BreuschGodfrey | Refusal {
	const { nobs: n, k, resid, rss } = fit;
	if (!Number.isInteger(order) || order < 1 || order >= n)
		return refuse('lag', `An order of ${order} is not possible with ${n} rows.`);
	const df2 = n - k - order;
	if (df2 < 1)
		return refuse('too-short', `${n} rows are too few for ${k} coefficients and ${order} lagged residuals.`);
	const lags = Array.from({ length: order }, (_, i) => shifted(resid, i + 1));
	const drop = addedColumns(fit, lags, 'The lagged residuals');
	if (isRefusal(drop)) return drop;
	const lm = (n * drop) / rss;
	const f = drop / order / ((rss - drop) / df2);
	return Object.freeze({
		order,
		lm,
		lmP: chiSquareSf(lm, order),
		f,
		fP: fSf(f, order, df2),
		df1: order,
		df2
	});
}

function shifted(e: Float64Array, by: number): Float64Array {
	const out = new Float64Array(e.length);
	out.set(e.subarray(0, e.length - by), by);
	return out;
}
