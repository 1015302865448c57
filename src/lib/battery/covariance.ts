import type { CovarianceOf } from '$lib/econometrics/error-correction/one-step';
import { isRefusal } from '$lib/econometrics/refusal';
import { neweyWest } from '$lib/econometrics/regression/newey-west';
import type { OlsFit } from '$lib/econometrics/regression/ols';
import { robustErrors } from '$lib/econometrics/regression/robust';
import { periodsPerYear } from '$lib/domain/period';
import type { Specification } from '$lib/domain/specification';

/** Which standard errors a model has; `lag` is the Bartlett truncation of HAC. */
export interface ErrorKind {
	readonly kind: Specification['standardErrors'];
	readonly lag?: number;
}

/**
 * Periods that one-period news stays in the dependent variable: the span of a year-on-year change, a moving sum or a
 * moving mean; 1 where its targets do not overlap.
 */
export const overlapOf = (spec: Specification): number => {
	const steps = spec.series.find(({ name }) => name === spec.dependent)?.transform ?? [];
	return Math.max(
		1,
		...steps.map((step) => {
			if (step.step === 'yoy' || step.step === 'log-yoy') return periodsPerYear[spec.frequency];
			return step.step === 'sum' || step.step === 'mean' ? step.of : 1;
		})
	);
};

/** Truncation floor(4 (n/100)^(2/9)), Newey & West 1994; at least what overlapping targets make. */
export const hacLag = (n: number, overlap: number): number =>
	Math.max(Math.floor(4 * (n / 100) ** (2 / 9)), overlap - 1);

/** HAC covariance of a regression, not adjusted for degrees of freedom. Newey & West 1987 Econometrica 55, 703-708. */
export const hacCovariance = (fit: OlsFit, lag: number): Float64Array | undefined => {
	const errors = neweyWest(fit, lag);
	return isRefusal(errors) ? undefined : errors.vcov;
};

/** A refused covariance leaves no errors at all, never those of another kind. */
const unknown = (fit: OlsFit): Float64Array => new Float64Array(fit.k * fit.k).fill(NaN);

const hc3Covariance: CovarianceOf = (fit) => {
	const errors = robustErrors(fit, 'HC3');
	return isRefusal(errors) ? unknown(fit) : errors.vcov;
};

/** The covariance that a specification asks for. */
export const covarianceFor = (
	spec: Specification
): { readonly covarianceOf: CovarianceOf; readonly kind: (fit: OlsFit) => ErrorKind } => {
	const overlap = overlapOf(spec);
	switch (spec.standardErrors) {
		case 'ols':
			return { covarianceOf: (fit) => fit.vcov, kind: () => ({ kind: 'ols' }) };
		case 'hc3':
			return { covarianceOf: hc3Covariance, kind: () => ({ kind: 'hc3' }) };
		case 'hac':
			return {
				covarianceOf: (fit) => hacCovariance(fit, hacLag(fit.nobs, overlap)) ?? unknown(fit),
				kind: (fit) => ({ kind: 'hac', lag: hacLag(fit.nobs, overlap) })
			};
	}
};
