import { isRefusal, refuse, type Refusal } from '../refusal';
import { ols, type OlsFit } from '../regression/ols';
import { constant, trend } from '../series/deterministic';
import { designOf, type Regressor } from '../series/design';
import { lagged, laggedDifference } from '../series/lags';
import { longRunVariance } from '../unit-root/long-run-variance';
import type { StaticModel } from './engle-granger';

/** Long-run slopes with errors that are normal under cointegration. */
export interface DynamicOls {
	/** The whole regression, leads and lags included. */
	readonly fit: OlsFit;
	readonly leads: number;
	readonly lag: number;
	/** Long-run variance of the residuals with a Bartlett window of `lag`. */
	readonly longRunVariance: number;
	/** Deterministic terms and drivers; se from the long-run variance, with degrees of freedom taken off. */
	readonly coefficients: readonly { readonly name: string; readonly coef: number; readonly se: number }[];
}

/**
 * Least squares of the levels with `leads` leads and lags of the changes of the drivers, which take their
 * endogeneity out. Stock & Watson (1993) Econometrica 61, 783-820; Saikkonen (1991) Econometric Theory 7, 1-21.
 */
export function dynamicOls(
	{ y, det, drivers, dummies }: StaticModel,
	{ leads, lag }: { readonly leads: number; readonly lag: number }
): DynamicOls | Refusal {
	if (!Number.isInteger(leads) || leads < 0)
		return refuse('lag', `${leads} is not a number of leads and lags`);
	const from = leads + 1;
	const to = y.length - 1 - leads;
	if (to < from) return refuse('too-short', `${y.length} periods leave no row with ${leads} leads and lags`);
	const deterministic: Regressor[] = [];
	if (det !== 'n') deterministic.push(constant(to - from + 1));
	if (det === 'ct') deterministic.push(trend(from + 1, to - from + 1));
	const levels = [...drivers, ...(dummies ?? [])].map(({ name, column }): Regressor => ({
		name,
		column: lagged(column, 0, from, to)
	}));
	const changes = drivers.flatMap(({ name, column }) =>
		Array.from({ length: 2 * leads + 1 }, (_, i): Regressor => {
			const by = i - leads;
			return { name: `d.${name}.l${by}`, column: laggedDifference(column, by, from, to) };
		})
	);
	const fit = ols(lagged(y, 0, from, to), designOf([...deterministic, ...levels, ...changes]));
	if (isRefusal(fit)) return fit;
	if (!Number.isInteger(lag) || lag < 0 || lag >= fit.nobs)
		return refuse('lag', `truncation lag ${lag} of ${fit.nobs} rows`);
	const variance = longRunVariance(fit.resid, lag);
	if (!(variance > 0)) return refuse('no-variance', `the long-run variance at lag ${lag} is not positive`);
	// fit.se is sigma sqrt((X'X)^-1): exchange sigma for the root of the long-run variance.
	const factor = Math.sqrt((variance * fit.nobs) / (fit.nobs - fit.k)) / fit.sigma;
	const shown = deterministic.length + levels.length;
	return Object.freeze({
		fit,
		leads,
		lag,
		longRunVariance: variance,
		coefficients: Object.freeze(
			fit.names
				.slice(0, shown)
				.map((name, j) => Object.freeze({ name, coef: fit.coef[j]!, se: fit.se[j]! * factor }))
		)
	});
}
