import { isRefusal, refuse, type Refusal } from '../refusal';
import type { LeastSquares } from '../regression/least-squares';
import { orthogonalise } from '../regression/orthogonalise';
import { recurse } from './row-recursion';

export interface RecursiveResiduals {
	/** Row (1-based) of the first recursive residual: k + 1. */
	readonly first: number;
	/** One a row from there on; their squares sum to the residual sum of squares. */
	readonly w: Float64Array;
}

/**
 * Recursive residuals: each row's prediction error from the rows before it, scaled to the variance of the errors
 * (Brown, Durbin & Evans 1975, JRSS B 37, 149-192). Refuses `first-rows` when the first k rows are not of full rank.
 */
export function recursiveResiduals(fit: LeastSquares): RecursiveResiduals | Refusal {
	const { k, design } = fit;
	const head = orthogonalise({ names: design.names, columns: design.columns.map((c) => c.slice(0, k)) }, k);
	if (isRefusal(head))
		return refuse('first-rows', `Over the first ${k} rows the design is not of full rank. ${head.detail}`);
	return Object.freeze({ first: k + 1, w: recurse(fit, 'forward').w.slice(k) });
}
