import { isRefusal, type Refusal } from '../refusal';
import { leastSquares } from '../regression/least-squares';
import { constant, trend } from '../series/deterministic';
import { designOf, type Regressor } from '../series/design';
import { dickeyFuller } from './adf';
import { mackinnonP, type CriticalValues } from './mackinnon';
import { refuseSeries } from './usable-series';

/** Dickey-Fuller test after local-to-unity detrending. */
export interface DfGls {
	readonly det: 'c' | 'ct';
	readonly lags: number;
	readonly nobs: number;
	/** Below the critical value rejects the unit root. */
	readonly stat: number;
	/** Coefficients of constant and, for ct, trend in the quasi-differenced regression. */
	readonly detrending: readonly number[];
	/** For c only: the distribution is that of the Dickey-Fuller statistic without deterministic terms. */
	readonly pvalue: number | null;
	readonly critical: CriticalValues;
	/** Said when the sample is shorter than the shortest tabulated one, whose row is then taken. */
	readonly shorterThanTable: boolean;
}

/** b0 + b1/T + b2/T^2 by level, for det c. */
const SURFACE = {
	'1%': [-2.5658, -1.96, -10.04],
	'5%': [-1.9393, -0.398, 0],
	'10%': [-1.6156, -0.181, 0]
} as const;

/** Elliott, Rothenberg & Stock (1996), table 1: 1/T and the 1, 5 and 10 % values, for det ct. */
const TREND_TABLE: readonly (readonly [number, number, number, number])[] = [
	[1 / 50, -3.77, -3.19, -2.89],
	[1 / 100, -3.58, -3.03, -2.74],
	[1 / 200, -3.46, -2.93, -2.64],
	[0, -3.48, -2.89, -2.57]
];

/**
 * Tests the null of a unit root in `v` with `lags` lagged differences, more powerful than the plain test.
 * Elliott, Rothenberg & Stock (1996) Econometrica 64, 813-836.
 */
export function dfGls(
	v: Float64Array,
	{ det, lags }: { readonly det: 'c' | 'ct'; readonly lags: number }
): DfGls | Refusal {
	const refusal = refuseSeries(v);
	if (refusal) return refusal;
	const T = v.length;
	const root = 1 - (det === 'c' ? 7 : 13.5) / T;
	const columns: Regressor[] = [constant(T)];
	if (det === 'ct') columns.push(trend(1, T));
	const quasi = columns.map(({ name, column }) => ({ name, column: quasiDifference(column, root) }));
	const fit = leastSquares(quasiDifference(v, root), designOf(quasi));
	if (isRefusal(fit)) return fit;
	const detrended = v.map((value, t) =>
		columns.reduce((rest, { column }, j) => rest - fit.coef[j]! * column[t]!, value)
	);
	const test = dickeyFuller(detrended, 'n', lags);
	if (isRefusal(test)) return test;
	return Object.freeze({
		det,
		lags,
		nobs: test.nobs,
		stat: test.stat,
		detrending: Object.freeze(Array.from(fit.coef)),
		pvalue: det === 'c' ? mackinnonP(test.stat, 'n', 1) : null,
		critical: det === 'c' ? constantCritical(T) : trendCritical(T),
		shorterThanTable: det === 'ct' && T < 50
	});
}

/** The first observation as it is, then v(t) - root v(t-1). */
const quasiDifference = (v: Float64Array, root: number): Float64Array =>
	v.map((value, t) => (t === 0 ? value : value - root * v[t - 1]!));

function constantCritical(T: number): CriticalValues {
	const at = ([b0, b1, b2]: readonly [number, number, number]) => b0 + b1 / T + b2 / T ** 2;
	return Object.freeze({ '1%': at(SURFACE['1%']), '5%': at(SURFACE['5%']), '10%': at(SURFACE['10%']) });
}

/** Linear in 1/T between the tabulated sizes. */
function trendCritical(T: number): CriticalValues {
	const x = Math.min(1 / T, TREND_TABLE[0]![0]);
	const below = TREND_TABLE.findIndex((row) => x >= row[0]);
	const lower = TREND_TABLE[below]!;
	const upper = TREND_TABLE[Math.max(below - 1, 0)]!;
	const share = upper[0] === lower[0] ? 0 : (x - lower[0]) / (upper[0] - lower[0]);
	const at = (i: 1 | 2 | 3) => lower[i] + share * (upper[i] - lower[i]);
	return Object.freeze({ '1%': at(1), '5%': at(2), '10%': at(3) });
}
