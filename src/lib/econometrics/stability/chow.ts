import { isRefusal, refuse, type Refusal } from '../refusal';
import { fSf } from '../distributions/f';
import { leastSquares, type LeastSquares } from '../regression/least-squares';

export interface Chow {
	/** Last row (1-based) of the first part. */
	readonly n1: number;
	readonly f: number;
	readonly p: number;
	readonly df1: number;
	readonly df2: number;
}

/**
 * Chow's test. Null: the same coefficients before and after a date known beforehand, the first part ending with row n1
 * (Chow 1960, Econometrica 28, 591-605). A date found by looking at the data calls for supF instead. Refuses
 * `too-short` (a part has no more rows than coefficients) and what a fit of either part refuses.
 */
export function chow(fit: LeastSquares, n1: number): Chow | Refusal {
	const { nobs: n, k, rss } = fit;
	if (!Number.isInteger(n1) || n1 <= k || n - n1 <= k)
		return refuse('too-short', `Parts of ${n1} and ${n - n1} rows are too few for ${k} coefficients each.`);
	const before = part(fit, 0, n1);
	if (isRefusal(before)) return before;
	const after = part(fit, n1, n);
	if (isRefusal(after)) return after;
	const apart = before.rss + after.rss;
	const df2 = n - 2 * k;
	const f = (rss - apart) / k / (apart / df2);
	return Object.freeze({ n1, f, p: fSf(f, k, df2), df1: k, df2 });
}

/**
 * Chow's predictive test. Null: the last m rows follow the relation of those before. Works with m below the number of
 * coefficients (Chow 1960). Refuses `lag` (m not a whole number from 1), `too-short` and what the fit refuses.
 */
export function predictiveChow(fit: LeastSquares, m: number): (Chow & { readonly m: number }) | Refusal {
	const { nobs: n, k, rss } = fit;
	if (!Number.isInteger(m) || m < 1) return refuse('lag', `${m} is no number of rows.`);
	const n1 = n - m;
	if (n1 <= k) return refuse('too-short', `The ${n1} rows before are too few for ${k} coefficients.`);
	const before = part(fit, 0, n1);
	if (isRefusal(before)) return before;
	const df2 = n1 - k;
	const f = (rss - before.rss) / m / (before.rss / df2);
	return Object.freeze({ n1, m, f, p: fSf(f, m, df2), df1: m, df2 });
}

/** Fits rows from..to-1 (0-based). The residuals stand in for y: the change of coefficients drops out. */
function part(fit: LeastSquares, from: number, to: number): LeastSquares | Refusal {
	const columns = fit.design.columns.map((column) => column.slice(from, to));
	const out = leastSquares(fit.resid.slice(from, to), { names: fit.design.names, columns });
	if (!isRefusal(out)) return out;
	return refuse(out.refused, `Over rows ${from + 1} to ${to}: ${out.detail}`);
}
