import { refuse, type Refusal } from '../refusal';
import type { LeastSquares } from '../regression/least-squares';
import { HANSEN_MOST_REGRESSORS, hansenP, type BreakFunctional } from './hansen-p';
import { recurse } from './row-recursion';

/** One statistic over all break dates. */
export interface BreakStatistic {
	readonly stat: number;
	/** The published approximation. */
	readonly p: number;
	/** The same, held where its polynomial would turn down: the one to judge by. */
	readonly pGuarded: number;
}

export interface SupF {
	/** First and last break date tried: rows (1-based) that end the first regime. */
	readonly from: number;
	readonly to: number;
	readonly lambda: number;
	/** Last row (1-based) of the first regime where F is largest. */
	readonly breakIndex: number;
	readonly sup: BreakStatistic;
	readonly ave: BreakStatistic;
	readonly exp: BreakStatistic;
	/** F in chi-square form (k times F) at every date from..to. */
	readonly path: Float64Array;
	/** The coefficients left less room than the trim asks for: shown, not judged. */
	readonly widened: boolean;
	/** More regressors than the published approximation covers. */
	readonly beyondTable: boolean;
}

/**
 * Quandt-Andrews test. Null: no break in the coefficients at an unknown date. F at every date of the trimmed sample
 * from one forward and one backward pass over the rows (Andrews 1993, Econometrica 61, 821-856; Andrews & Ploberger
 * 1994, Econometrica 62, 1383-1414). The distribution assumes stationary regressors. Refuses `empty-trim` and
 * `perfect-fit`.
 */
export function supF(fit: LeastSquares, trim = 0.15): SupF | Refusal {
	const { nobs: n, k } = fit;
	const cut = Math.floor(trim * n);
	const from = Math.max(cut, k + 1);
	const to = Math.min(n - cut, n - k - 1);
	return supFBetween(fit, from, to, trim * n <= k + 1);
}

/** The same over break dates from..to given outright. */
export function supFBetween(fit: LeastSquares, from: number, to: number, widened = false): SupF | Refusal {
	const { nobs: n, k } = fit;
	if (from > to || from < 1 || to >= n || n <= 2 * k)
		return refuse('empty-trim', `With ${n} rows and ${k} coefficients no break date is left after trimming.`);
	const path = statistics(fit, from, to);
	if (path.some((f) => !Number.isFinite(f)))
		return refuse(
			'perfect-fit',
			'For some break date both parts are fitted exactly; nothing is left to test.'
		);
	const largest = Math.max(...path);
	const lambda = ((n - from) * to) / (from * (n - to));
	const statistic = (functional: BreakFunctional, stat: number): BreakStatistic =>
		Object.freeze({
			stat,
			p: hansenP(functional, stat, k, lambda, false),
			pGuarded: hansenP(functional, stat, k, lambda, true)
		});
	const average = path.reduce((sum, f) => sum + f, 0) / path.length;
	const weighted = path.reduce((sum, f) => sum + Math.exp((f - largest) / 2), 0) / path.length;
	return Object.freeze({
		from,
		to,
		lambda,
		breakIndex: from + path.indexOf(largest),
		sup: statistic('sup', largest),
		ave: statistic('ave', average),
		exp: statistic('exp', Math.log(weighted) + largest / 2),
		path,
		widened,
		beyondTable: k > HANSEN_MOST_REGRESSORS
	});
}

/** (rss - u)/(u/(n-2k)) with u the residual sums of squares of both parts. */
function statistics(fit: LeastSquares, from: number, to: number): Float64Array {
	const { nobs: n, k, rss } = fit;
	const before = recurse(fit, 'forward').rss;
	const after = recurse(fit, 'backward').rss;
	return Float64Array.from({ length: to - from + 1 }, (_, i) => {
		const b = from + i;
		const apart = before[b - 1]! + after[n - b - 1]!;
		return (rss - apart) / (apart / (n - 2 * k));
	});
}
