import type { OlsFit } from '../regression/ols';
import type { EquationDesign } from './design';
import type { Equation, Relation } from './equation';
import { covarianceAt, indexOf, type Coefficients } from './terms';

/** An estimated error-correction equation. Arrays over periods run from period 1; rows of `fit` from firstPeriod. */
export interface ErrorCorrectionFit {
	readonly form: 'one-step' | 'two-step' | 'imposed';
	readonly equation: Equation;
	readonly T: number;
	readonly maxLag: number;
	/** Period of the first row of the regression. */
	readonly firstPeriod: number;
	/** The regression on the free terms. */
	readonly fit: OlsFit;
	/** Free and fixed terms together. */
	readonly coefficients: Coefficients;
	readonly adjustment: Adjustment;
	/** The long run the gap is measured from; null in a one-step equation whose speed is 0. */
	readonly relation: Relation | null;
	/** Regression of the levels, two-step only; its t-ratios have no t distribution. */
	readonly static: OlsFit | null;
	/** y less the long run, one value a period; null with `relation`. */
	readonly gap: Float64Array | null;
}

/** How strongly the equation pulls back. */
export interface Adjustment {
	/** Speed, positive when a gap closes. */
	readonly lambda: number;
	readonly se: number;
	/** Ratio of the coefficient on the gap (minus lambda) to its standard error; null when it was fixed. */
	readonly t: number | null;
}

/** Values and covariance of free and fixed terms, free ones first. */
export function coefficientsOf(design: EquationDesign, fit: OlsFit, vcov: Float64Array): Coefficients {
	const terms = [...design.free, ...design.fixed.map((f) => f.term)];
	const size = terms.length;
	const values = new Float64Array(size);
	values.set(fit.coef);
	design.fixed.forEach((f, i) => (values[fit.k + i] = f.value));
	const covariance = new Float64Array(size * size);
	for (let j = 0; j < fit.k; j++) covariance.set(vcov.subarray(j * fit.k, (j + 1) * fit.k), j * size);
	return Object.freeze({ terms: Object.freeze(terms), values, covariance, df: fit.nobs - fit.k });
}

/** The speed of adjustment, minus the coefficient on y(t-1) or on the gap. */
export function adjustmentOf(coefficients: Coefficients): Adjustment {
	const at = indexOf(
		coefficients,
		(term) => term.kind === 'gap' || (term.kind === 'own-level' && term.lag === 1)
	);
	const value = coefficients.values[at]!;
	const se = Math.sqrt(covarianceAt(coefficients, at, at));
	return Object.freeze({ lambda: -value, se, t: se > 0 ? value / se : null });
}
