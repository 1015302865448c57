import { isRefusal, refuse, type Refusal } from '../refusal';
import { chiSquareSf } from '../distributions/chi-square';
import { isConstant } from '../regression/least-squares';
import type { OlsFit } from '../regression/ols';
import { designOf } from '../series/design';
import { constant } from '../series/deterministic';
import { explain, scaledSquares } from './squared-residuals';
import { standardised } from './standardised';

export interface WhiteSpecial {
	readonly special: number;
	readonly specialP: number;
	readonly df: 2;
}

/**
 * White's test in its special form. Null: equal variance. The squared residuals are regressed on a constant, the fitted
 * values and their square: n R^2, chi-square with 2 degrees of freedom (White 1980, Econometrica 48, 817-838; the form
 * of Wooldridge, Introductory Econometrics). Refuses `constant`, `rank`, `too-short`.
 */
export function whiteSpecial(fit: OlsFit): WhiteSpecial | Refusal {
	if (isConstant(fit.fitted)) return refuse('constant', 'The fitted values do not vary.');
	// Standardising does not change the span of 1, f, f^2.
	const f = standardised(fit.fitted);
	const design = designOf([
		constant(fit.nobs),
		{ name: 'fitted', column: f },
		{ name: 'fitted^2', column: f.map((value) => value * value) }
	]);
	const aux = explain(scaledSquares(fit.resid), design);
	if (isRefusal(aux)) return aux;
	const special = fit.nobs * aux.r2;
	return Object.freeze({ special, specialP: chiSquareSf(special, 2), df: 2 });
}
