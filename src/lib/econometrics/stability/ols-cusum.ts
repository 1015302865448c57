import type { OlsFit } from '../regression/ols';

export interface OlsCusum {
	/** Largest |cumulated residual| / (sigma sqrt n). */
	readonly stat: number;
	readonly p: number;
	/** Cumulated residuals over sigma sqrt n, one a row. */
	readonly path: Float64Array;
}

/**
 * CUSUM of ordinary residuals. Null: constant coefficients; the limit is the supremum of a Brownian bridge
 * (Ploberger & Kraemer 1992, Econometrica 60, 271-285).
 */
export function olsCusum(fit: OlsFit): OlsCusum {
	const unit = fit.sigma * Math.sqrt(fit.nobs);
	let total = 0;
	const path = fit.resid.map((e) => (total += e) / unit);
	const stat = Math.max(...path.map(Math.abs));
	return Object.freeze({ stat, p: kolmogorovP(stat), path });
}

/** P(sup |Brownian bridge| > x) by Kolmogorov's series. */
export function kolmogorovP(x: number): number {
	if (x < 0.1) return 1;
	let sum = 0;
	for (let i = 1; i <= 100; i++) sum -= (-1) ** i * Math.exp(-2 * i * i * x * x);
	return 2 * sum;
}
