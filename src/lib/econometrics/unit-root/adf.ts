import { isRefusal, refuse, type Refusal } from '../refusal';
import { adfRegression } from './adf-regression';
import { mackinnonCritical, mackinnonP, type CriticalValues, type Deterministic } from './mackinnon';
import { sequentialFit, type SequentialFit } from './sequential-fit';
import { refuseSeries, toUnitSize } from './usable-series';

/** Augmented Dickey-Fuller test of one series. */
export interface Adf {
	readonly det: Deterministic;
	readonly lags: number;
	readonly nobs: number;
	/** t-ratio of the level; a value below the critical one rejects the unit root. */
	readonly stat: number;
	readonly rhoMinusOne: number;
	readonly se: number;
	readonly pvalue: number;
	readonly critical: CriticalValues;
	/** F of constant and level (c); shown, not judged. */
	readonly phi1: number | null;
	/** F of constant, trend and level (ct). */
	readonly phi2: number | null;
	/** F of trend and level (ct). */
	readonly phi3: number | null;
}

/** The t-ratio and what belongs to it, before a table is chosen: a series of its own and residuals need others. */
export type DickeyFuller = Pick<Adf, 'det' | 'lags' | 'nobs' | 'stat' | 'rhoMinusOne' | 'se'> & {
	readonly fit: SequentialFit;
};

/**
 * Tests the null of a unit root in `v` against stationarity around the deterministic terms, with `lags` lagged
 * differences. The trend regressor counts observations from 1. Dickey & Fuller (1979) JASA 74, 427-431; Said &
 * Dickey (1984) Biometrika 71, 599-607; phi statistics: Dickey & Fuller (1981) Econometrica 49, 1057-1072.
 */
export function adf(
	v: Float64Array,
	{ det, lags }: { readonly det: Deterministic; readonly lags: number }
): Adf | Refusal {
	const regression = dickeyFuller(v, det, lags);
	if (isRefusal(regression)) return regression;
	const { fit, stat, nobs, rhoMinusOne, se } = regression;
	// The last `count` columns are constant, trend and level, in that order.
	const jointF = (count: number): number => {
		const drop = fit.coordinates.slice(fit.k - count).reduce((sum, z) => sum + z * z, 0);
		return drop / count / (fit.rss / (fit.nobs - fit.k));
	};
	return Object.freeze({
		det,
		lags,
		nobs,
		stat,
		rhoMinusOne,
		se,
		pvalue: mackinnonP(stat, det, 1)!,
		critical: mackinnonCritical(det, 1, nobs)!,
		phi1: det === 'c' ? jointF(2) : null,
		phi2: det === 'ct' ? jointF(3) : null,
		phi3: det === 'ct' ? jointF(2) : null
	});
}

/** The Dickey-Fuller regression itself, columns ordered lags, deterministic terms, level. */
export function dickeyFuller(v: Float64Array, det: Deterministic, lags: number): DickeyFuller | Refusal {
	const refusal = refuseSeries(v) ?? refuseLags(v, lags);
	if (refusal) return refusal;
	const regression = adfRegression(toUnitSize(v).values, det, lags, lags);
	const columns = [...regression.lags, ...regression.deterministic, regression.level];
	const fit = sequentialFit(
		regression.y,
		columns.map((c) => c.values),
		columns.map((c) => c.name)
	);
	if (isRefusal(fit)) return fit;
	return Object.freeze({
		det,
		lags,
		nobs: fit.nobs,
		stat: fit.last.t,
		rhoMinusOne: fit.last.coef,
		se: fit.last.se,
		fit
	});
}

function refuseLags(v: Float64Array, lags: number): Refusal | null {
	if (!Number.isInteger(lags) || lags < 0) return refuse('lag', `${lags} is not a number of lags`);
	if (lags >= v.length - 1) return refuse('lag', `${lags} lags of ${v.length} observations`);
	return null;
}
