/**
 * Regressors in time order, one column a name. Every column has the rows of the regression, nothing is
 * padded. Names are built, never parsed: a series may itself be called `y` or contain dots.
 */
export interface Design {
	readonly names: readonly string[];
	readonly columns: readonly Float64Array[];
}

/** One named regressor. */
export interface Regressor {
	readonly name: string;
	readonly column: Float64Array;
}

/** A design from regressors, in their order. */
export const designOf = (regressors: readonly Regressor[]): Design =>
	Object.freeze({
		names: Object.freeze(regressors.map((r) => r.name)),
		columns: Object.freeze(regressors.map((r) => r.column))
	});
