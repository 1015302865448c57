import type { Design } from '../series/design';
import { refuse, type Refusal } from '../refusal';
import { factorise, thinQ, triangle } from '../linalg/householder';
import { invertUpper, solveUpper } from '../linalg/triangular';
import { mean } from '../linalg/vectors';

/**
 * An orthonormal basis of the columns of a design: X = Q G^-1, hence (X'X)^-1 = G G' and the least-squares
 * coefficients of any y are G Q'y. One such factor serves every right-hand side.
 */
export interface Orthogonal {
	/** Q, column-major n x k. */
	readonly basis: Float64Array;
	/** G, column-major k x k, rows in the order of the design. */
	readonly inverseFactor: Float64Array;
	/** Means taken out of the columns before factoring; all 0 without a constant. */
	readonly means: Float64Array;
	/** Position of the constant among the columns, -1 when there is none. */
	readonly intercept: number;
}

/** Least |R_jj| of unit columns: an exactly collinear column leaves about 1e-15, Filip's polynomial 5e-8. */
const RANK_LIMIT = 1e-10;
const CONSTANT_LIMIT = 1e-12;

/**
 * Orthonormalises a design by Householder QR of centred columns of unit length, never through X'X (Bjorck 1996,
 * Numerical Methods for Least Squares Problems). Refuses `constant` (a column that does not vary beside the
 * constant, or is 0) and `rank` (a column in the span of those before it).
 */
export function orthogonalise(design: Design, n: number): Orthogonal | Refusal {
	const k = design.columns.length;
	const intercept = design.columns.findIndex(isFlat);
	const others = design.columns.map((_, j) => j).filter((j) => j !== intercept);
	const means = new Float64Array(k);
	const norms = new Float64Array(k);
	const matrix = new Float64Array(n * others.length);
	for (const [at, j] of others.entries()) {
		const column = design.columns[j]!;
		means[j] = intercept >= 0 ? mean(column) : 0;
		norms[j] = unitColumn(column, means[j]!, matrix.subarray(at * n, (at + 1) * n));
		if (norms[j] === 0) return refuse('constant', `The regressor ${design.names[j]} does not vary.`);
	}
	const factor = factorise(matrix, n, others.length);
	const r = triangle(factor);
	const dependent = factor.diagonal.findIndex((d) => Math.abs(d) <= RANK_LIMIT);
	if (dependent >= 0) return refuse('rank', dependence(r, others, dependent, design.names, intercept));
	const inner = invertUpper(r, others.length);
	return Object.freeze({
		basis: withConstant(thinQ(factor), n, others, intercept),
		inverseFactor: assemble(inner, others, means, norms, n, intercept, design.columns[intercept]?.[0] ?? 1),
		means,
		intercept
	});
}

/** True for a column of one repeated value other than 0. */
function isFlat(column: Float64Array): boolean {
	const first = column[0];
	return first !== undefined && first !== 0 && column.every((value) => value === first);
}

/** Writes (column - m) / norm and returns norm; 0 when nothing is left of the column. */
function unitColumn(column: Float64Array, m: number, out: Float64Array): number {
	let raw = 0;
	let squares = 0;
	for (let i = 0; i < out.length; i++) {
		out[i] = column[i]! - m;
		raw += column[i]! * column[i]!;
		squares += out[i]! * out[i]!;
	}
	const norm = Math.sqrt(squares);
	if (norm <= CONSTANT_LIMIT * Math.sqrt(raw)) return 0;
	for (let i = 0; i < out.length; i++) out[i]! /= norm;
	return norm;
}

/** Names the columns whose combination the dependent column is. */
function dependence(
	r: Float64Array,
	others: readonly number[],
	at: number,
	names: readonly string[],
	intercept: number
): string {
	const size = others.length;
	const leading = new Float64Array(at * at);
	for (let j = 0; j < at; j++) leading.set(r.subarray(j * size, j * size + at), j * at);
	const weights = solveUpper(leading, at, r.slice(at * size, at * size + at));
	const involved = others.slice(0, at).filter((_, i) => Math.abs(weights[i]!) > 1e-6);
	const parts = involved.map((j) => names[j]!);
	if (intercept >= 0) parts.unshift(names[intercept]!);
	return `The regressor ${names[others[at]!]} is a linear combination of ${parts.join(', ')}.`;
}

/** Puts the direction of the constant at its place among the columns of Q. */
function withConstant(
	inner: Float64Array,
	n: number,
	others: readonly number[],
	intercept: number
): Float64Array {
	if (intercept < 0) return inner;
	const basis = new Float64Array(n * (others.length + 1));
	for (const [at, j] of others.entries()) basis.set(inner.subarray(at * n, (at + 1) * n), j * n);
	basis.fill(1 / Math.sqrt(n), intercept * n, (intercept + 1) * n);
	return basis;
}

/** G: the inverse triangle with scaling and centring undone. */
function assemble(
	inner: Float64Array,
	others: readonly number[],
	means: Float64Array,
	norms: Float64Array,
	n: number,
	intercept: number,
	constant: number
): Float64Array {
	const k = means.length;
	const g = new Float64Array(k * k);
	for (const [col, jc] of others.entries()) {
		for (const [row, jr] of others.entries()) {
			const value = inner[col * others.length + row]! / norms[jr]!;
			g[jc * k + jr] = value;
			if (intercept >= 0) g[jc * k + intercept]! -= (means[jr]! * value) / constant;
		}
	}
	if (intercept >= 0) g[intercept * k + intercept] = 1 / (Math.sqrt(n) * constant);
	return g;
}
