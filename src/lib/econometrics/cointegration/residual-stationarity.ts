import { isRefusal, refuse, type Refusal } from '../refusal';
import type { LagSearch } from '../unit-root/adf-auto';
import { kpss, type Kpss } from '../unit-root/kpss';
import { mackinnonCritical, mackinnonP, type CriticalValues } from '../unit-root/mackinnon';
import { residualTest, type ResidualLags } from './engle-granger';

/** Where the coefficients of the gap come from decides the table; the caller states the fact, never the table. */
export type GapOrigin =
	/** The long run was estimated on this very sample. */
	| {
			readonly coefficients: 'estimated-here';
			readonly det: 'n' | 'c' | 'ct';
			readonly drivers: number;
			/** A step dummy in the relation: no table applies. */
			readonly step: boolean;
	  }
	/** The long run is a frozen one; `overlap`: the window includes the sample it was once estimated on. */
	| { readonly coefficients: 'held'; readonly overlap: boolean; readonly drivers: number };

/** Test of the null that a gap has a unit root. */
export interface ResidualStationarity {
	readonly origin: GapOrigin;
	/** Deterministic terms of the test regression: a held gap need not have mean zero. */
	readonly regressionDet: 'n' | 'c';
	/** Row of MacKinnon's surfaces that judges. */
	readonly table: {
		readonly det: 'n' | 'c' | 'ct';
		readonly variables: number;
		readonly observations: number;
	};
	readonly lags: number;
	readonly search: LagSearch | null;
	readonly nobs: number;
	/** A value below the critical one rejects the unit root. */
	readonly stat: number;
	readonly pvalue: number | null;
	/** Judged; null where no table applies. */
	readonly critical: CriticalValues | null;
	/** For a held gap over its own sample: the values for one variable, shown beside the conservative ones. */
	readonly criticalSingle: CriticalValues | null;
	/** For a held gap: the test without a constant, for a relation whose constant is held too. */
	readonly withoutConstant: { readonly stat: number; readonly critical: CriticalValues } | null;
	/** KPSS around a constant with the long window, for a held gap; an estimated gap needs Shin's test instead. */
	readonly kpss: Kpss | null;
}

/**
 * Dickey-Fuller test of a gap with the table its origin asks for. Estimated on this sample: no deterministic terms,
 * one variable for the dependent and one a driver, for the fit bent the gap. Held, on later data: an ordinary
 * series with a constant. Held, over the old sample too: the conservative row of the estimated case. MacKinnon
 * (2010) Queen's Economics Department Working Paper 1227.
 */
export function residualStationarity(
	gap: Float64Array,
	origin: GapOrigin,
	lags: ResidualLags
): ResidualStationarity | Refusal {
	if (!Number.isInteger(origin.drivers) || origin.drivers < 1)
		return refuse('too-short', 'a relation needs at least one driver');
	return origin.coefficients === 'held' ? heldGap(gap, origin, lags) : estimatedGap(gap, origin, lags);
}

function estimatedGap(
	gap: Float64Array,
	origin: Extract<GapOrigin, { coefficients: 'estimated-here' }>,
	lags: ResidualLags
): ResidualStationarity | Refusal {
	const test = residualTest(gap, 'n', lags);
	if (isRefusal(test)) return test;
	const table = { det: origin.det, variables: origin.drivers + 1, observations: gap.length - 1 };
	const tabulated = origin.det !== 'n' && !origin.step;
	return Object.freeze({
		origin,
		regressionDet: 'n',
		table: Object.freeze(table),
		lags: test.lags,
		search: test.search,
		nobs: test.nobs,
		stat: test.stat,
		pvalue: tabulated ? mackinnonP(test.stat, table.det, table.variables) : null,
		critical: tabulated ? mackinnonCritical(table.det, table.variables, table.observations) : null,
		criticalSingle: null,
		withoutConstant: null,
		kpss: null
	});
}

function heldGap(
	gap: Float64Array,
	origin: Extract<GapOrigin, { coefficients: 'held' }>,
	lags: ResidualLags
): ResidualStationarity | Refusal {
	const test = residualTest(gap, 'c', lags);
	if (isRefusal(test)) return test;
	const bare = residualTest(gap, 'n', test.lags);
	const around = kpss(gap, { det: 'c', lag: 'long' });
	const table = {
		det: 'c' as const,
		variables: origin.overlap ? origin.drivers + 1 : 1,
		observations: origin.overlap ? gap.length - 1 : test.nobs
	};
	return Object.freeze({
		origin,
		regressionDet: 'c',
		table: Object.freeze(table),
		lags: test.lags,
		search: test.search,
		nobs: test.nobs,
		stat: test.stat,
		pvalue: mackinnonP(test.stat, 'c', table.variables),
		critical: mackinnonCritical('c', table.variables, table.observations),
		criticalSingle: origin.overlap ? mackinnonCritical('c', 1, test.nobs) : null,
		withoutConstant: isRefusal(bare)
			? null
			: Object.freeze({ stat: bare.stat, critical: mackinnonCritical('n', 1, bare.nobs)! }),
		kpss: isRefusal(around) ? null : around
	});
}
