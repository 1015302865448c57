import { isRefusal, refuse, type Refusal } from '../refusal';
import { longRunVariance } from '../unit-root/long-run-variance';
import { dynamicOls } from './dynamic-ols';
import { hasStep, type StaticModel } from './engle-granger';

/** Test of the null that the levels cointegrate. */
export interface Shin {
	readonly leads: number;
	readonly lag: number;
	readonly nobs: number;
	/** A value above the critical one rejects cointegration. */
	readonly stat: number;
	/** Null where no table applies: more than five drivers, or a step in the relation. */
	readonly critical: { readonly '10%': number; readonly '5%': number; readonly '1%': number } | null;
}

/** Shin (1994), table 1: by deterministic terms, then drivers 1..5; 10, 5 and 1 %. */
const TABLE = {
	n: [
		[0.841, 1.199, 2.126],
		[0.624, 0.895, 1.623],
		[0.475, 0.682, 1.305],
		[0.374, 0.537, 1.003],
		[0.307, 0.433, 0.781]
	],
	c: [
		[0.231, 0.314, 0.533],
		[0.163, 0.221, 0.38],
		[0.121, 0.159, 0.271],
		[0.094, 0.121, 0.208],
		[0.075, 0.097, 0.158]
	],
	ct: [
		[0.097, 0.121, 0.184],
		[0.081, 0.101, 0.15],
		[0.069, 0.085, 0.126],
		[0.056, 0.073, 0.109],
		[0.05, 0.061, 0.087]
	]
} as const;

/**
 * KPSS statistic of the residuals of dynamic least squares. Shin (1994) Econometric Theory 10, 91-115. Slow
 * adjustment looks like its absence: a short window rejects true cointegration too often, so the long one judges.
 */
export function shin(
	model: StaticModel,
	options: { readonly leads: number; readonly lag: number }
): Shin | Refusal {
	const relation = dynamicOls(model, options);
	if (isRefusal(relation)) return relation;
	const { resid, nobs } = relation.fit;
	const stat = cumulatedSquares(resid) / relation.longRunVariance;
	if (!Number.isFinite(stat)) return refuse('no-variance', 'the residuals have no long-run variance');
	const row = hasStep(model) ? undefined : TABLE[model.det][model.drivers.length - 1];
	return Object.freeze({
		...options,
		nobs,
		stat,
		critical: row ? Object.freeze({ '10%': row[0], '5%': row[1], '1%': row[2] }) : null
	});
}

/** The same statistic of a series of residuals as it stands, without a table. */
export const shinStatistic = (resid: Float64Array, lag: number): number =>
	cumulatedSquares(resid) / longRunVariance(resid, lag);

/** Sum of squared partial sums over n squared. */
function cumulatedSquares(e: Float64Array): number {
	let partial = 0;
	let squares = 0;
	for (let t = 0; t < e.length; t++) {
		partial += e[t]!;
		squares += partial * partial;
	}
	return squares / e.length ** 2;
}
