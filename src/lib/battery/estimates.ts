import { studentTTwoSided } from '$lib/econometrics/distributions/student-t';
import { halfLife } from '$lib/econometrics/error-correction/half-life';
import type { Estimate as DeltaEstimate, LongRun } from '$lib/econometrics/error-correction/long-run';
import { covarianceAt, termName } from '$lib/econometrics/error-correction/terms';
import { isRefusal } from '$lib/econometrics/refusal';
import type { Covariance, Estimate, Estimates, HalfLife, TermEstimate } from '$lib/domain/run-result';
import { equationTerms, longRunTerms, type SpecificationTerm } from '$lib/domain/specification-terms';
import { figure } from './context';
import { givenStatistics, regressionEstimates, statisticsOf } from './regression-estimates';
import type { Model } from './model';

const estimateOf = (value: number, variance: number | null, df: number): Estimate => {
	const se = variance === null ? null : figure(Math.sqrt(variance));
	if (se === null || se === 0) return { value, se: null, t: null, p: null };
	return { value, se, t: value / se, p: figure(studentTTwoSided(value / se, df)) };
};

/** Terms of the equation with their estimates, in the order of the specification. */
const equationEstimates = (model: Model): { terms: TermEstimate[]; covariance: Covariance } => {
	const { coefficients, spec } = model;
	const names = coefficients.terms.map(termName);
	const fixed = new Set(spec.fixed.map(({ term }) => term));
	const ordered = equationTerms(spec).flatMap((term) => {
		const at = names.indexOf(term.code);
		return at < 0 ? [] : [{ term, at }];
	});
	const known = coefficients.covariance !== null;
	const terms = ordered.map(({ term, at }): TermEstimate => {
		const variance = known && !fixed.has(term.code) ? covarianceAt(coefficients, at, at) : null;
		return Object.freeze({
			term,
			...estimateOf(coefficients.values[at]!, variance, coefficients.df),
			...(fixed.has(term.code) && { fixed: true })
		});
	});
	const rows = known ? ordered.map((a) => ordered.map((b) => covarianceAt(coefficients, a.at, b.at))) : [];
	const usable = rows.every((row) => row.every(Number.isFinite));
	return { terms, covariance: { terms: ordered.map(({ term }) => term.code), rows: usable ? rows : [] } };
};

const bare = (value: number): Estimate => ({ value, se: null, t: null, p: null });

const deltaOf = ({ coef, se, t, p }: DeltaEstimate): Estimate => ({
	value: coef,
	se: figure(se),
	t: figure(t),
	p: figure(p)
});

/** Delta-method estimates of the one-step form, by long-run term. */
const determinedTerms = (terms: readonly SpecificationTerm[], found: LongRun): TermEstimate[] =>
	terms.flatMap((term): TermEstimate[] => {
		const estimate =
			term.kind === 'constant'
				? found.constant
				: term.kind === 'trend'
					? found.trend
					: term.kind === 'level'
						? found.slopes.find(({ series }) => series === term.series)
						: found.dummies.find(({ name }) => name === term.series);
		return estimate ? [Object.freeze({ term, ...deltaOf(estimate) })] : [];
	});

/** The relation that the gap is measured from, without errors. */
const relationTerms = (terms: readonly SpecificationTerm[], model: Model): TermEstimate[] => {
	const { relation } = model;
	if (!relation) return [];
	return terms.map((term) => {
		const value =
			term.kind === 'constant'
				? relation.constant
				: term.kind === 'trend'
					? relation.trend
					: term.kind === 'level'
						? relation.slopes.find(({ series }) => series === term.series)!.value
						: (relation.dummies.find(({ name }) => name === term.series)?.value ?? 0);
		return Object.freeze({ term, ...bare(value) });
	});
};

const longRunCovarianceOf = (model: Model): Covariance | null => {
	const { determined } = model;
	if (!determined?.covariance || !determined.covariance.every(Number.isFinite)) return null;
	const terms = [
		'speed',
		...determined.slopes.map(({ series }) => `long.${series}`),
		...(determined.constant ? ['long.const'] : [])
	];
	const size = terms.length;
	const { covariance } = determined;
	return { terms, rows: terms.map((_, i) => terms.map((__, j) => covariance[j * size + i]!)) };
};

const halfLifeOf = (model: Model, level: number): HalfLife => {
	const found = halfLife(model.coefficients, level);
	if (isRefusal(found)) return { value: null, low: null, high: null, level, note: found.detail };
	return {
		value: figure(found.periods),
		low: figure(found.interval?.low),
		high: figure(found.interval?.high),
		level
	};
};

/** The model's figures as a result holds them. */
export const estimatesOf = (model: Model, interval: number): Estimates => {
	const { spec, data, design } = model;
	const long = longRunTerms(spec);
	const { lambda, se } = model.adjustment;
	const { terms, covariance } = equationEstimates(model);
	const determined = model.determined ? determinedTerms(long, model.determined) : null;
	const known = model.coefficients.covariance !== null;
	const n = model.residuals.length;
	return Object.freeze({
		estimator: spec.estimator.kind,
		standardErrors: Object.freeze({
			kind: model.errors.kind,
			...(model.errors.lag !== undefined && { lag: model.errors.lag })
		}),
		speed: estimateOf(lambda, known ? se ** 2 : null, model.coefficients.df),
		halfLife: halfLifeOf(model, interval),
		longRun: Object.freeze(model.form === 'levels' && determined ? determined : relationTerms(long, model)),
		longRunOneStep: determined && Object.freeze(determined),
		longRunCovariance: longRunCovarianceOf(model),
		equation: Object.freeze({
			terms: Object.freeze(terms),
			covariance,
			fit: model.fit ? statisticsOf(model.fit) : givenStatistics(model),
			firstPeriod: data.periods[design.firstPeriod - 1]!,
			lastPeriod: data.periods[design.firstPeriod + n - 2]!
		}),
		static: model.static ? regressionEstimates(spec, model.static, 'long', data.periods, 1) : null
	});
};
