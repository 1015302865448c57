import type { Verdict } from '$lib/domain/run';

/** Levels of a policy, as the verdict rules use them. */
export interface Levels {
	/** A bad rejection below this p-value is a query. */
	readonly query: number;
	/** A bad rejection below this p-value fails. */
	readonly fails: number;
	/** A good rejection counts as shown at this level. */
	readonly shown: number;
}

const order: Readonly<Record<Verdict, number>> = { holds: 0, query: 1, fails: 2, 'not assessable': -1 };

/** The worse of several verdicts; *not assessable* only where nothing else was found. */
export const worst = (verdicts: readonly Verdict[]): Verdict =>
	verdicts.reduce<Verdict>((worse, one) => (order[one] > order[worse] ? one : worse), 'not assessable');

/** At best a query. */
export const notBetterThanQuery = (verdict: Verdict): Verdict => (verdict === 'holds' ? 'query' : verdict);

/** At worst a query. */
export const notWorseThanQuery = (verdict: Verdict): Verdict => (verdict === 'fails' ? 'query' : verdict);

/** A verdict and the codes of the rules that made it other than the plain reading. */
export interface Judged {
	readonly verdict: Verdict;
	readonly because: readonly string[];
	/** The null was rejected at the level, before other rules. */
	readonly rejected: boolean;
}

/** Where a rejection is bad: fails below one level, query below the other. */
export const badRejection = (p: number, { query, fails }: Levels): Verdict =>
	p < fails ? 'fails' : p < query ? 'query' : 'holds';

/** Evidence of a test in which a rejection is good. */
export interface GoodTest {
	/** The statistic passes its critical value at the level; undefined where there is no table. */
	readonly passes: boolean | undefined;
	/** p-value beside the critical value: asymptotic ones lose against it, exact ones decide alone. */
	readonly p?: { readonly value: number; readonly asymptotic: boolean };
	/** The model does not correct: lambda <= 0 or >= 2, or a boundary was crossed. */
	readonly refuted?: boolean;
	/** A test of the opposite null rejects. */
	readonly opposed?: boolean;
}

const shownBy = (
	{ passes, p }: GoodTest,
	level: number
): { shown: boolean; because: string[] } | undefined => {
	if (p && !p.asymptotic) return { shown: p.value < level, because: [] };
	if (passes === undefined) return p ? { shown: p.value < level, because: [] } : undefined;
	if (p && p.value < level !== passes) return { shown: false, because: ['critical-and-p-differ'] };
	return { shown: passes, because: [] };
};

/**
 * Where a rejection is good (cointegration, adjustment, stationarity of the gap): not rejecting is a query, worded "not
 * shown"; it fails on positive evidence against only. Undefined where neither table nor p-value exists.
 */
export const goodRejection = (test: GoodTest, level: number): Judged | undefined => {
	const read = shownBy(test, level);
	if (!read) return undefined;
	const rejected = read.shown;
	if (test.refuted) return { verdict: 'fails', because: [...read.because, 'does-not-correct'], rejected };
	if (test.opposed)
		return {
			verdict: rejected ? 'query' : 'fails',
			because: [...read.because, 'opposite-null-rejected'],
			rejected
		};
	return { verdict: rejected ? 'holds' : 'query', because: read.because, rejected };
};

/** The tabulated critical value of a level; undefined where the table lacks the level. */
export const criticalAt = (critical: object | null, level: number): number | undefined =>
	(critical as Readonly<Record<string, number>> | null)?.[`${Number((100 * level).toPrecision(6))}%`];

/** A speed that does not correct: positive evidence against an error-correction model. */
export const doesNotCorrect = (lambda: number): boolean => lambda <= 0 || lambda >= 2;

/** Speed of adjustment: corrects below 1, overshoots up to 2, does not correct beyond or at 0 and below. */
export const adjustmentVerdict = (lambda: number, holdsBelow: number, failsFrom: number): Verdict => {
	if (lambda <= 0 || lambda >= failsFrom) return 'fails';
	return lambda < holdsBelow ? 'holds' : 'query';
};

/** Sign of a slope against the declared one; a wrong sign inside so many standard errors of zero is a query. */
export const signVerdict = (
	value: number,
	se: number | null,
	sign: '+' | '-' | 'any',
	withinErrors: number
): Verdict => {
	if (sign === 'any') return 'holds';
	const right = sign === '+' ? value > 0 : value < 0;
	if (right) return 'holds';
	return se !== null && Math.abs(value) <= withinErrors * se ? 'query' : 'fails';
};

/** A slope in its declared range; an interval that reaches over a limit is a query. */
export const rangeVerdict = (
	value: number,
	interval: { readonly low: number; readonly high: number } | null,
	[low, high]: readonly [number, number]
): Verdict => {
	const inside = value >= low && value <= high;
	const straddles =
		interval !== null &&
		(inside ? interval.low < low || interval.high > high : interval.high >= low && interval.low <= high);
	if (straddles) return 'query';
	return inside ? 'holds' : 'fails';
};
