import { isRefusal, type Refusal } from '../refusal';
import { rowSquares } from '../linalg/orthogonal';
import { centred, sumOfSquares } from '../linalg/vectors';
import type { OlsFit } from '../regression/ols';
import { orthogonalise } from '../regression/orthogonalise';
import { designOf } from '../series/design';
import { constant } from '../series/deterministic';

export interface Collinearity {
	/** For every regressor but the constant. */
	readonly vif: readonly { readonly name: string; readonly vif: number }[];
	/** Ratio of extreme singular values of X with columns of unit length, constant included, not centred. */
	readonly conditionNumber: number;
}

/**
 * Variance inflation factors 1/(1-R_j^2), R_j^2 of a regressor on a constant and the others, and the scaled condition
 * number (Belsley, Kuh & Welsch 1980, Regression Diagnostics). Lagged levels of an equation in logs give hundreds without
 * harm; judge the drivers' own design. Refuses `rank` when a constant added for the purpose lies in the span.
 */
export function collinearity(fit: OlsFit): Collinearity | Refusal {
	const { nobs: n, design, intercept } = fit;
	const others = design.names
		.map((name, j) => ({ name, column: design.columns[j]! }))
		.filter((_, j) => j !== intercept);
	const factor = orthogonalise(designOf([constant(n), ...others]), n);
	if (isRefusal(factor)) return factor;
	const k = others.length + 1;
	const inverseDiagonal = rowSquares(factor.inverseFactor, k, k);
	const vif = others.map(({ name, column }, j) =>
		Object.freeze({ name, vif: inverseDiagonal[j + 1]! * sumOfSquares(centred(column)) })
	);
	return Object.freeze({ vif: Object.freeze(vif), conditionNumber: fit.conditionNumber });
}
