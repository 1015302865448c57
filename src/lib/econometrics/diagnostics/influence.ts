import { refuse, type Refusal } from '../refusal';
import { rowSquares } from '../linalg/orthogonal';
import type { OlsFit } from '../regression/ols';

/** How much one row shapes the estimates; null where the row is fitted exactly and nothing is left to scale. */
export interface RowInfluence {
	/** Row of the regression, 1-based. */
	readonly row: number;
	readonly hat: number;
	readonly rstandard: number | null;
	readonly rstudent: number | null;
	readonly cooks: number | null;
	readonly dffits: number | null;
	/** In the order of the fit's names. */
	readonly dfbetas: readonly number[] | null;
	/** The common limits that the row passes: 2k/n, 2 sqrt(k/n), 2/sqrt(n), 1. */
	readonly flags: readonly ('hat' | 'dffits' | 'dfbetas' | 'cooks')[];
}

/**
 * Leverage, studentised residuals and the change of fit and coefficients when a row is left out (Belsley, Kuh & Welsch
 * 1980, Regression Diagnostics; Cook 1977, Technometrics 19, 15-18). Refuses `too-short` when leaving out a row leaves
 * no degree of freedom.
 */
export function influence(fit: OlsFit): readonly RowInfluence[] | Refusal {
	const { nobs: n, k, inverseFactor } = fit;
	if (n - k - 1 < 1)
		return refuse('too-short', `${n} rows are too few to leave one out with ${k} coefficients.`);
	// Square roots of the diagonal of (X'X)^-1.
	const spread = rowSquares(inverseFactor, k, k).map(Math.sqrt);
	return Object.freeze(Array.from({ length: n }, (_, t) => rowInfluence(fit, t, spread)));
}

function rowInfluence(fit: OlsFit, t: number, spread: Float64Array): RowInfluence {
	const { nobs: n, k, rss, sigma } = fit;
	const hat = fit.leverage[t]!;
	const e = fit.resid[t]!;
	const free = 1 - hat;
	const without = Math.sqrt(Math.max(0, rss - (e * e) / free) / (n - k - 1));
	if (free < 1e-10 || without === 0) {
		const empty = { rstandard: null, rstudent: null, cooks: null, dffits: null, dfbetas: null };
		return Object.freeze({ row: t + 1, hat, ...empty, flags: Object.freeze(['hat'] as const) });
	}
	const rstandard = e / (sigma * Math.sqrt(free));
	const rstudent = e / (without * Math.sqrt(free));
	const cooks = (rstandard ** 2 * hat) / free / k;
	const dffits = rstudent * Math.sqrt(hat / free);
	const dfbetas = changes(fit, t).map((change, j) => (change * e) / free / (without * spread[j]!));
	const passed = {
		hat: hat > (2 * k) / n,
		dffits: Math.abs(dffits) > 2 * Math.sqrt(k / n),
		dfbetas: dfbetas.some((value) => Math.abs(value) > 2 / Math.sqrt(n)),
		cooks: cooks > 1
	};
	const flags = (['hat', 'dffits', 'dfbetas', 'cooks'] as const).filter((name) => passed[name]);
	return Object.freeze({
		row: t + 1,
		hat,
		rstandard,
		rstudent,
		cooks,
		dffits,
		dfbetas,
		flags: Object.freeze(flags)
	});
}

/** (X'X)^-1 x_t, from the orthonormal basis. */
function changes(fit: OlsFit, t: number): number[] {
	const { nobs: n, k, basis, inverseFactor: g } = fit;
	return Array.from({ length: k }, (_, j) => {
		let sum = 0;
		for (let c = 0; c < k; c++) sum += g[c * k + j]! * basis[c * n + t]!;
		return sum;
	});
}
