import { equationDesign, type EquationDesign } from '$lib/econometrics/error-correction/design';
import type { Equation, Relation } from '$lib/econometrics/error-correction/equation';
import {
	adjustmentOf,
	type Adjustment,
	type ErrorCorrectionFit
} from '$lib/econometrics/error-correction/fit';
import { longRun, type LongRun } from '$lib/econometrics/error-correction/long-run';
import { oneStep, type CovarianceOf } from '$lib/econometrics/error-correction/one-step';
import type { Coefficients } from '$lib/econometrics/error-correction/terms';
import { imposedLongRun, twoStep } from '$lib/econometrics/error-correction/two-step';
import { isRefusal, refuse, type Refusal } from '$lib/econometrics/refusal';
import type { OlsFit } from '$lib/econometrics/regression/ols';
import type { Specification } from '$lib/domain/specification';
import { levelsAreFree } from '$lib/domain/specification-terms';
import { covarianceFor, type ErrorKind } from './covariance';
import { givenModel } from './given';
import type { ModelSample } from './sample';

/** The model on its sample, estimated here or given. */
export interface Model {
	readonly spec: Specification;
	readonly data: ModelSample;
	/** Free levels of the variables in the equation, or a gap made beforehand. */
	readonly form: 'levels' | 'gap';
	readonly design: EquationDesign;
	readonly coefficients: Coefficients;
	readonly residuals: Float64Array;
	/** The regression of the equation; null where the coefficients were given. */
	readonly fit: OlsFit | null;
	readonly adjustment: Adjustment;
	/** Null in a one-step equation whose speed is 0. */
	readonly relation: Relation | null;
	readonly static: OlsFit | null;
	/** y less the long run, one value a period. */
	readonly gap: Float64Array | null;
	/** The long run of the one-step form with delta-method errors; null where it cannot be had. */
	readonly determined: LongRun | null;
	/** The one-step form of the equation; null where it cannot be estimated, or nothing is estimated here. */
	readonly unrestricted: ErrorCorrectionFit | null;
	readonly errors: ErrorKind;
}

/** The same equation without values imposed on terms that the other form does not have. */
const freeLevels = (equation: Equation): Equation => ({
	...equation,
	fixed: equation.fixed.filter(({ term }) => term !== 'ec.l1')
});

const relationOf = (spec: Specification): Relation => {
	const imposed = spec.estimator.imposed!;
	return Object.freeze({
		constant: imposed.constant,
		trend: imposed.trend ?? 0,
		slopes: spec.longRun.drivers.map(({ series }) => ({
			series,
			value: imposed.slopes.find((slope) => slope.series === series)!.value
		})),
		dummies: []
	});
};

const estimate = (
	spec: Specification,
	data: ModelSample,
	covarianceOf: CovarianceOf
): ErrorCorrectionFit | Refusal => {
	const { equation, sample } = data;
	switch (spec.estimator.kind) {
		case 'one-step':
			return oneStep(equation, sample, covarianceOf);
		case 'two-step':
			return twoStep(equation, sample, covarianceOf);
		case 'imposed':
			return imposedLongRun(equation, sample, relationOf(spec), covarianceOf);
		default:
			return refuse('given', 'The coefficients are given, nothing is estimated.');
	}
};

/** The one-step form of a model estimated otherwise, for the errors of its long run. */
const oneStepOf = (data: ModelSample, covarianceOf: CovarianceOf): ErrorCorrectionFit | null => {
	const fit = oneStep(freeLevels(data.equation), data.sample, covarianceOf);
	return isRefusal(fit) ? null : fit;
};

/** Estimates the model of a specification, or takes its given coefficients. */
export const modelOf = (spec: Specification, data: ModelSample): Model | Refusal => {
	if (spec.estimator.kind === 'elsewhere') return givenModel(spec, data);
	const errors = covarianceFor(spec);
	const fitted = estimate(spec, data, errors.covarianceOf);
	if (isRefusal(fitted)) return fitted;
	const form = levelsAreFree(spec) ? 'levels' : 'gap';
	const design = equationDesign(
		data.equation,
		data.sample,
		form === 'levels' ? 'levels' : { gap: fitted.gap! }
	);
	if (isRefusal(design)) return design;
	const levels = form === 'levels' ? fitted : oneStepOf(data, errors.covarianceOf);
	const determined = levels && spec.estimator.kind !== 'imposed' ? longRun(levels.coefficients) : null;
	return Object.freeze({
		spec,
		data,
		form,
		design,
		coefficients: fitted.coefficients,
		residuals: fitted.fit.resid,
		fit: fitted.fit,
		adjustment: adjustmentOf(fitted.coefficients),
		relation: fitted.relation,
		static: fitted.static,
		gap: fitted.gap,
		determined: determined && !isRefusal(determined) ? determined : null,
		unrestricted: levels,
		errors: errors.kind(fitted.fit)
	});
};
