import { sumOfSquares } from '$lib/econometrics/linalg/vectors';
import type { OlsFit } from '$lib/econometrics/regression/ols';
import type { EquationEstimates, FitStatistics, TermEstimate } from '$lib/domain/run-result';
import type { Specification } from '$lib/domain/specification';
import type { SpecificationTerm } from '$lib/domain/specification-terms';
import { figure } from './context';
import type { Model } from './model';

/** Fit statistics of a regression. */
export const statisticsOf = (fit: OlsFit): FitStatistics =>
	Object.freeze({
		n: fit.nobs,
		k: fit.k,
		df: fit.nobs - fit.k,
		rss: fit.rss,
		sigma: fit.sigma,
		r2: fit.r2,
		adjustedR2: fit.adjr2,
		logLikelihood: fit.loglik,
		aic: fit.aic,
		bic: fit.bic,
		hqic: fit.hqic,
		durbinWatson: fit.dw,
		conditionNumber: figure(fit.conditionNumber)
	});

/** What can be said of coefficients that were given: the residuals they leave. */
export const givenStatistics = (model: Model): FitStatistics => {
	const { residuals: e, design } = model;
	const n = e.length;
	const k = design.free.length;
	const rss = sumOfSquares(e);
	const mean = design.y.reduce((sum, value) => sum + value, 0) / n;
	const tss = sumOfSquares(design.y.map((value) => value - mean));
	const logLikelihood = (-n / 2) * (Math.log(2 * Math.PI) + Math.log(rss / n) + 1);
	const turns = sumOfSquares(e.slice(1).map((value, i) => value - e[i]!));
	return Object.freeze({
		n,
		k,
		df: n - k,
		rss,
		sigma: Math.sqrt(rss / (n - k)),
		r2: 1 - rss / tss,
		adjustedR2: 1 - rss / (n - k) / (tss / (n - 1)),
		logLikelihood,
		aic: -2 * logLikelihood + 2 * k,
		bic: -2 * logLikelihood + k * Math.log(n),
		hqic: -2 * logLikelihood + 2 * k * Math.log(Math.log(n)),
		durbinWatson: turns / rss,
		conditionNumber: null
	});
};

type Part = 'long' | 'short';

/** The term behind a column of a regression that the battery made itself; columns of the long run have their series' name. */
const termOf = (spec: Specification, name: string, part: Part): SpecificationTerm => {
	const base = { code: part === 'long' ? `long.${name}` : name, part, lag: 0, difference: false } as const;
	if (name === 'const') return { ...base, kind: 'constant' };
	if (name === 'trend') return { ...base, kind: 'trend' };
	if (part === 'long') {
		const driver = spec.longRun.drivers.some(({ series }) => series === name);
		return { ...base, kind: driver ? 'level' : 'dummy', series: name };
	}
	const own = spec.shortRun.own.find((lag) => `d.y.l${lag}` === name);
	if (own !== undefined)
		return { ...base, kind: 'difference', series: spec.dependent, lag: own, difference: true };
	for (const { series, lags } of spec.shortRun.drivers) {
		const lag = lags.find((each) => `d.${series}.l${each}` === name);
		if (lag !== undefined) return { ...base, kind: 'difference', series, lag, difference: true };
	}
	return { ...base, kind: 'dummy', series: name };
};

/**
 * A regression as a result holds it. Least-squares errors in levels have no known distribution, so the long run shows
 * none; `firstPeriod` is the 1-based period of its first row.
 */
export const regressionEstimates = (
	spec: Specification,
	fit: OlsFit,
	part: Part,
	periods: readonly string[],
	firstPeriod: number
): EquationEstimates => {
	const terms = fit.names.map((name, j): TermEstimate => {
		const errors =
			part === 'long'
				? { se: null, t: null, p: null }
				: { se: figure(fit.se[j]), t: figure(fit.t[j]), p: figure(fit.p[j]) };
		return Object.freeze({ term: Object.freeze(termOf(spec, name, part)), value: fit.coef[j]!, ...errors });
	});
	const rows = fit.names.map((_, i) => fit.names.map((__, j) => fit.vcov[j * fit.k + i]!));
	return Object.freeze({
		terms: Object.freeze(terms),
		covariance: { terms: terms.map(({ term }) => term.code), rows: part === 'long' ? [] : rows },
		fit: statisticsOf(fit),
		firstPeriod: periods[firstPeriod - 1]!,
		lastPeriod: periods[firstPeriod + fit.nobs - 2]!
	});
};
