import { isRefusal, refuse, type Refusal } from '../refusal';
import { chiSquareSf } from '../distributions/chi-square';
import { isConstant } from '../regression/least-squares';
import type { OlsFit } from '../regression/ols';
import { designOf, type Regressor } from '../series/design';
import { constant } from '../series/deterministic';
import { explain, scaledSquares } from './squared-residuals';
import { standardised } from './standardised';

export interface White {
	/** n R^2. */
	readonly full: number;
	readonly p: number;
	readonly df: number;
}

/**
 * White's test in full. Null: equal variance. The squared residuals are regressed on a constant, the regressors, their
 * squares and their cross-products (White 1980, Econometrica 48, 817-838). Refuses `too-short` when there are nearly as
 * many of these as rows, `rank` when they are collinear (a 0/1 dummy equals its square), `constant` when there are none.
 */
export function white(fit: OlsFit): White | Refusal {
	const { nobs: n, design, intercept } = fit;
	const base = design.names
		.map((name, j): Regressor => ({ name, column: design.columns[j]! }))
		.filter((_, j) => j !== intercept);
	if (base.length === 0)
		return refuse('constant', 'There is no regressor on which the variance could depend.');
	const terms = withProducts(base.map(({ name, column }) => ({ name, column: standardised(column) })));
	const columns = terms.length + 1;
	if (columns >= n - 1)
		return refuse('too-short', `${n} rows are too few for the ${columns} terms of White's test.`);
	const flat = terms.find(({ column }) => isConstant(column));
	if (flat) return refuse('rank', `The term ${flat.name} of White's test does not vary.`);
	const design2 = designOf([
		constant(n),
		...terms.map(({ name, column }) => ({ name, column: standardised(column) }))
	]);
	const aux = explain(scaledSquares(fit.resid), design2);
	if (isRefusal(aux)) return aux;
	const full = n * aux.r2;
	return Object.freeze({ full, p: chiSquareSf(full, terms.length), df: terms.length });
}

/** The columns, then every product of two of them, each with itself included. */
function withProducts(columns: readonly Regressor[]): Regressor[] {
	const products = columns.flatMap((a, i) =>
		columns.slice(i).map((b): Regressor => ({
			name: `${a.name} x ${b.name}`,
			column: a.column.map((value, t) => value * b.column[t]!)
		}))
	);
	return [...columns, ...products];
}
