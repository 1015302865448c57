import { isRefusal, refuse, type Refusal } from '../refusal';
import { chiSquareSf } from '../distributions/chi-square';
import { fSf } from '../distributions/f';
import { designOf } from '../series/design';
import { constant } from '../series/deterministic';
import { levelLag } from '../series/lags';
import { explain, scaledSquares } from './squared-residuals';

export interface ArchLm {
	readonly lags: number;
	/** Rows of the auxiliary regression. */
	readonly nobs: number;
	readonly lm: number;
	readonly lmP: number;
	readonly f: number;
	readonly fP: number;
	readonly df1: number;
	readonly df2: number;
}

/**
 * Engle's test. Null: the squared residuals do not depend on their own past. They are regressed on a constant and
 * `lags` of them (Engle 1982, Econometrica 50, 987-1007). Refuses `lag`, `too-short`, `constant`, `rank`.
 */
export function archLm(resid: Float64Array, lags: number): ArchLm | Refusal {
	const n = resid.length;
	if (!Number.isInteger(lags) || lags < 1 || lags >= n)
		return refuse('lag', `${lags} lags are not possible with ${n} residuals.`);
	const squares = scaledSquares(resid);
	const own = Array.from({ length: lags }, (_, i) => levelLag('e2', squares, i + 1, lags, n - 1));
	const aux = explain(squares.slice(lags), designOf([constant(n - lags), ...own]));
	if (isRefusal(aux)) return aux;
	const { r2, nobs } = aux;
	const df2 = nobs - lags - 1;
	const lm = nobs * r2;
	const f = r2 / lags / ((1 - r2) / df2);
	return Object.freeze({
		lags,
		nobs,
		lm,
		lmP: chiSquareSf(lm, lags),
		f,
		fP: fSf(f, lags, df2),
		df1: lags,
		df2
	});
}
