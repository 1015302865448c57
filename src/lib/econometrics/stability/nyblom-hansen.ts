import { refuse, type Refusal } from '../refusal';
import { cholesky } from '../linalg/cholesky';
import { solveTransposed } from '../linalg/triangular';
import type { OlsFit } from '../regression/ols';
import table from './nyblom-hansen.json';
import { tabulatedLevel, type TabulatedLevel } from './tabulated-level';

/** A statistic with its tabulated quantiles at 10, 5, 2.5 and 1 %. */
export interface ConstancyStatistic {
	readonly stat: number;
	/** Number of parameters tested together. */
	readonly df: number;
	/** Null beyond 20 parameters. */
	readonly critical: readonly number[] | null;
	/** As TabulatedLevel has it; null beyond the table. */
	readonly pBetween: TabulatedLevel['pBetween'] | null;
	readonly pApproximate: number | null;
}

export interface NyblomHansen {
	readonly jointWithVariance: ConstancyStatistic;
	readonly jointCoefficients: ConstancyStatistic;
	/** Each coefficient alone, in the order of names, and last the error variance. */
	readonly individual: readonly (ConstancyStatistic & { readonly name: string })[];
}

/**
 * Nyblom-Hansen test. Null: coefficients and error variance are constant; alternative: they follow a random walk
 * (Nyblom 1989, JASA 84, 223-230; Hansen 1992, J. Policy Modeling 14, 517-533). For stationary regressors. Refuses
 * `no-variance`.
 */
export function nyblomHansen(fit: OlsFit): NyblomHansen | Refusal {
	const { nobs: n, k, basis, resid, rss, sigma, names, design } = fit;
	const variance = resid.map((e) => (e * e - rss / n) / sigma ** 2);
	const scores = Array.from({ length: k }, (_, j) =>
		Float64Array.from(resid, (e, t) => (basis[j * n + t]! * e) / sigma)
	);
	const withVariance = joint([...scores, variance], n);
	const coefficients = joint(scores, n);
	if (withVariance === undefined || coefficients === undefined)
		return refuse('no-variance', 'The variance of the scores is singular.');
	const single = design.columns.map((column) =>
		alone(
			column.map((x, t) => (x * resid[t]!) / sigma),
			n
		)
	);
	single.push(alone(variance, n));
	if (single.some((stat) => !Number.isFinite(stat)))
		return refuse('no-variance', 'The scores of a coefficient do not vary.');
	const individual = single.map((stat, j) =>
		Object.freeze({ name: names[j] ?? 'variance', ...judged(stat, 1) })
	);
	return Object.freeze({
		jointWithVariance: Object.freeze(judged(withVariance, k + 1)),
		jointCoefficients: Object.freeze(judged(coefficients, k)),
		individual: Object.freeze(individual)
	});
}

/** tr(V^-1 sum S_t S_t') / n with S_t the cumulated scores and V the sum of their squares and products. */
function joint(scores: readonly Float64Array[], n: number): number | undefined {
	const m = scores.length;
	const v = new Float64Array(m * m);
	for (let i = 0; i < m; i++)
		for (let j = 0; j < m; j++) for (let t = 0; t < n; t++) v[j * m + i]! += scores[i]![t]! * scores[j]![t]!;
	const factor = cholesky(v, m);
	if (!factor) return undefined;
	const cumulated = new Float64Array(m);
	let total = 0;
	for (let t = 0; t < n; t++) {
		for (let j = 0; j < m; j++) cumulated[j]! += scores[j]![t]!;
		for (const value of solveTransposed(factor, m, cumulated)) total += value * value;
	}
	return total / n;
}

/** The same for one score. */
function alone(score: Float64Array, n: number): number {
	let cumulated = 0;
	let squares = 0;
	let total = 0;
	for (const g of score) {
		cumulated += g;
		squares += g * g;
		total += cumulated * cumulated;
	}
	return total / (n * squares);
}

function judged(stat: number, df: number): ConstancyStatistic {
	const critical = table.quantiles[df - 1] ?? null;
	if (!critical) return { stat, df, critical, pBetween: null, pApproximate: null };
	return { stat, df, critical, ...tabulatedLevel(stat, critical, table.levels) };
}
