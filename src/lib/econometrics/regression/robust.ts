import { isRefusal, type Refusal } from '../refusal';
import type { OlsFit } from './ols';
import { sandwich, type CovarianceEstimate } from './sandwich';

export type RobustKind = 'HC0' | 'HC1' | 'HC2' | 'HC3';

export interface RobustErrors extends CovarianceEstimate {
	readonly kind: RobustKind;
	/** Rows (1-based) that the regression fits exactly, as a pulse dummy does: their weight is 0. */
	readonly fittedExactly: readonly number[];
}

/**
 * Standard errors under unequal variance (White 1980, Econometrica 48, 817-838; MacKinnon & White 1985, Journal of
 * Econometrics 29, 305-325). The squared residual is weighted by 1 (HC0), n/(n-k) (HC1), 1/(1-h) (HC2) or
 * 1/(1-h)^2 (HC3), h the leverage of the row. Refuses `no-variance`.
 */
export function robustErrors(fit: OlsFit, kind: RobustKind): RobustErrors | Refusal {
	const { nobs: n, k, basis, resid, leverage } = fit;
	const fittedExactly = [...leverage.keys()].filter((i) => leverage[i]! > 1 - 1e-10).map((i) => i + 1);
	const weights = resid.map((e, i) => {
		const free = 1 - leverage[i]!;
		if (free < 1e-10) return 0;
		if (kind === 'HC2') return (e * e) / free;
		if (kind === 'HC3') return (e * e) / (free * free);
		return kind === 'HC1' ? (e * e * n) / (n - k) : e * e;
	});
	const meat = new Float64Array(k * k);
	for (let a = 0; a < k; a++) {
		for (let b = 0; b <= a; b++) {
			let sum = 0;
			for (let i = 0; i < n; i++) sum += weights[i]! * basis[a * n + i]! * basis[b * n + i]!;
			meat[a * k + b] = sum;
			meat[b * k + a] = sum;
		}
	}
	const estimate = sandwich(fit, meat);
	if (isRefusal(estimate)) return estimate;
	return Object.freeze({ ...estimate, kind, fittedExactly: Object.freeze(fittedExactly) });
}
