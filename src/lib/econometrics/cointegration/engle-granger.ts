import { isRefusal, refuse, type Refusal } from '../refusal';
import { ols, type OlsFit } from '../regression/ols';
import { constant, trend } from '../series/deterministic';
import { designOf, type Design, type Regressor } from '../series/design';
import { dickeyFuller } from '../unit-root/adf';
import { searchLags, type LagSearch } from '../unit-root/adf-auto';
import { mackinnonCritical, mackinnonP, type CriticalValues } from '../unit-root/mackinnon';

/** A relation in levels whose residuals are to be tested. */
export interface StaticModel {
	readonly y: Float64Array;
	readonly det: 'n' | 'c' | 'ct';
	readonly drivers: readonly Regressor[];
	/** Dummies of the relation; a step moves the distribution of every residual-based test. */
	readonly dummies?: readonly (Regressor & { readonly kind: 'pulse' | 'step' | 'seasonal' })[];
}

/** Lags of the test on the residuals: given, or chosen by AIC on the common sample of 0 .. maxLag. */
export type ResidualLags = number | { readonly rule: 'AIC' | 'BIC' | 'tsig'; readonly maxLag: number };

/** Test of the null that the residuals of a static regression have a unit root: no cointegration. */
export interface EngleGranger {
	readonly static: OlsFit;
	/** Residuals of the static regression, one a period. */
	readonly gap: Float64Array;
	readonly det: 'n' | 'c' | 'ct';
	/** Dependent variable and drivers. */
	readonly variables: number;
	readonly lags: number;
	readonly search: LagSearch | null;
	readonly nobs: number;
	/** A value below the critical one rejects: the levels cointegrate. */
	readonly stat: number;
	/** Asymptotic; null beyond six variables or where no table applies. */
	readonly pvalue: number | null;
	/** Judged, at T - 1 observations; null where no table applies: no deterministic terms, a step, over 12 variables. */
	readonly critical: CriticalValues | null;
	/** The same surface at the rows of the test regression. */
	readonly criticalNobs: CriticalValues | null;
}

/**
 * Engle-Granger test: static least squares, then a Dickey-Fuller regression on its residuals without deterministic
 * terms, judged by MacKinnon's surfaces for as many variables as the relation has. Engle & Granger (1987)
 * Econometrica 55, 251-276; MacKinnon (2010) Queen's Economics Department Working Paper 1227. Which variable
 * stands on the left matters.
 */
export function engleGranger(model: StaticModel, lags: ResidualLags): EngleGranger | Refusal {
	if (model.drivers.length === 0) return refuse('too-short', 'a relation needs at least one driver');
	const fit = ols(model.y, staticDesign(model));
	if (isRefusal(fit)) return fit;
	const test = residualTest(fit.resid, 'n', lags);
	if (isRefusal(test)) return test;
	const variables = model.drivers.length + 1;
	const tabulated = model.det !== 'n' && !hasStep(model);
	const critical = (n: number) => (tabulated ? mackinnonCritical(model.det, variables, n) : null);
	return Object.freeze({
		static: fit,
		gap: fit.resid,
		det: model.det,
		variables,
		lags: test.lags,
		search: test.search,
		nobs: test.nobs,
		stat: test.stat,
		pvalue: tabulated ? mackinnonP(test.stat, model.det, variables) : null,
		critical: critical(model.y.length - 1),
		criticalNobs: critical(test.nobs)
	});
}

/** A step in the relation takes it out of reach of the tables; a pulse or a season leaves the limit as it is. */
export const hasStep = (model: StaticModel): boolean =>
	(model.dummies ?? []).some((dummy) => dummy.kind === 'step');

/** Constant, trend, drivers and dummies in levels. */
export function staticDesign({ y, det, drivers, dummies }: StaticModel): Design {
	const T = y.length;
	const deterministic: Regressor[] = [];
	if (det !== 'n') deterministic.push(constant(T));
	if (det === 'ct') deterministic.push(trend(1, T));
	return designOf([...deterministic, ...drivers, ...(dummies ?? [])]);
}

/** Dickey-Fuller regression of a gap, with its lag order given or chosen. */
export function residualTest(gap: Float64Array, det: 'n' | 'c', lags: ResidualLags) {
	if (typeof lags === 'number') {
		const test = dickeyFuller(gap, det, lags);
		return isRefusal(test) ? test : Object.freeze({ ...test, search: null });
	}
	const search = searchLags(gap, { det, ...lags });
	if (isRefusal(search)) return search;
	const test = dickeyFuller(gap, det, search.selected);
	return isRefusal(test) ? test : Object.freeze({ ...test, search });
}
