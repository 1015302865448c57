import { isRefusal, type Refusal } from '../refusal';
import { ols, type OlsFit } from '../regression/ols';
import { equationDesign } from './design';
import type { Equation, Sample } from './equation';
import { adjustmentOf, coefficientsOf, type ErrorCorrectionFit } from './fit';
import { gapFrom } from './gap';
import { longRun } from './long-run';

/** Covariance of the coefficients of a regression, column-major; the default is that of least squares. */
export type CovarianceOf = (fit: OlsFit) => Float64Array;

/**
 * Estimates speed, long run and short run together: dy on deterministic terms, y(t-1), the drivers at t-1 and the
 * lags of dy and dx. Banerjee, Dolado, Galbraith & Hendry (1993). The t-ratio of y(t-1) has no t distribution
 * when nothing cointegrates.
 */
export function oneStep(
	equation: Equation,
	sample: Sample,
	covarianceOf: CovarianceOf = (fit) => fit.vcov
): ErrorCorrectionFit | Refusal {
	const design = equationDesign(equation, sample, 'levels');
	if (isRefusal(design)) return design;
	const fit = ols(design.y, design.design);
	if (isRefusal(fit)) return fit;
	const coefficients = coefficientsOf(design, fit, covarianceOf(fit));
	const implied = longRun(coefficients);
	const relation = isRefusal(implied) ? null : implied.relation;
	return Object.freeze({
		form: 'one-step',
		equation,
		T: sample.T,
		maxLag: design.maxLag,
		firstPeriod: design.firstPeriod,
		fit,
		coefficients,
		adjustment: adjustmentOf(coefficients),
		relation,
		static: null,
		gap: relation && gapFrom(relation, equation, sample)
	});
}
