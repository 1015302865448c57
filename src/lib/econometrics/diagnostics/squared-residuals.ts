import { isRefusal, refuse, type Refusal } from '../refusal';
import type { Design } from '../series/design';
import { leastSquares } from '../regression/least-squares';

/** Share of the variation of squared residuals that a regression explains, and the explained sum of squares. */
export interface Explained {
	readonly r2: number;
	readonly explained: number;
	readonly nobs: number;
}

/** Squared residuals over their mean: the tests on them do not depend on the unit of the data. */
export function scaledSquares(resid: Float64Array): Float64Array {
	let squares = 0;
	for (const e of resid) squares += e * e;
	const variance = squares / resid.length;
	return resid.map((e) => (e * e) / variance);
}

/** Regresses scaled squared residuals on a design that contains a constant. */
export function explain(squares: Float64Array, design: Design): Explained | Refusal {
	const fit = leastSquares(squares, design);
	if (isRefusal(fit))
		return refuse(
			fit.refused,
			`The auxiliary regression of the squared residuals is not possible: ${fit.detail}`
		);
	return { r2: 1 - fit.rss / fit.tss, explained: fit.tss - fit.rss, nobs: fit.nobs };
}
