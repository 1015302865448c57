import { isRefusal, refuse, type Refusal } from '../refusal';
import { ols } from '../regression/ols';
import { equationDesign } from './design';
import type { Equation, Relation, Sample } from './equation';
import { adjustmentOf, coefficientsOf, type ErrorCorrectionFit } from './fit';
import { gapFrom } from './gap';
import type { CovarianceOf } from './one-step';
import { staticRegression, staticRelation } from './static-regression';

/**
 * Estimates the long run by the static regression and puts its lagged residual into the equation of changes.
 * The second step treats the long run as known. Engle & Granger (1987) Econometrica 55, 251-276.
 */
export function twoStep(
	equation: Equation,
	sample: Sample,
	covarianceOf: CovarianceOf = (fit) => fit.vcov
): ErrorCorrectionFit | Refusal {
	const levels = staticRegression(equation, sample);
	if (isRefusal(levels)) return levels;
	const fit = onGap(equation, sample, levels.resid, covarianceOf);
	if (isRefusal(fit)) return fit;
	return Object.freeze({
		...fit,
		form: 'two-step',
		relation: staticRelation(equation, levels),
		static: levels,
		gap: levels.resid
	});
}

/**
 * Estimates the equation of changes around a long run that is given, not estimated: standard errors are the
 * ordinary ones.
 */
export function imposedLongRun(
	equation: Equation,
	sample: Sample,
	relation: Relation,
	covarianceOf: CovarianceOf = (fit) => fit.vcov
): ErrorCorrectionFit | Refusal {
	const absent = relation.slopes.find(({ series }) => sample.series.get(series)?.length !== sample.T);
	if (absent) return refuse('domain', `the sample has no series ${absent.series}`);
	const unknown = relation.dummies.find(({ name }) => !equation.dummies.some((dummy) => dummy.name === name));
	if (unknown) return refuse('domain', `the equation has no dummy ${unknown.name}`);
	const gap = gapFrom(relation, equation, sample);
	const fit = onGap(equation, sample, gap, covarianceOf);
	if (isRefusal(fit)) return fit;
	return Object.freeze({ ...fit, form: 'imposed', relation, static: null, gap });
}

function onGap(
	equation: Equation,
	sample: Sample,
	gap: Float64Array,
	covarianceOf: CovarianceOf
): Omit<ErrorCorrectionFit, 'form' | 'relation' | 'static' | 'gap'> | Refusal {
	const design = equationDesign(equation, sample, { gap });
	if (isRefusal(design)) return design;
	const fit = ols(design.y, design.design);
	if (isRefusal(fit)) return fit;
	const coefficients = coefficientsOf(design, fit, covarianceOf(fit));
	return {
		equation,
		T: sample.T,
		maxLag: design.maxLag,
		firstPeriod: design.firstPeriod,
		fit,
		coefficients,
		adjustment: adjustmentOf(coefficients)
	};
}
