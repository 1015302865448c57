/**
 * A triangle [R | z] that grows by one row at a time through Givens rotations (Golub & Van Loan, Matrix Computations,
 * section 5.1.8). No matrix is inverted and no digit of earlier rows is lost.
 */
export interface GrowingTriangle {
	/** R by rows, k x k, r_jj >= 0. */
	readonly r: Float64Array;
	readonly z: Float64Array;
}

export const emptyTriangle = (k: number): GrowingTriangle => ({
	r: new Float64Array(k * k),
	z: new Float64Array(k)
});

/** A direction not yet seen counts as absent when the row has no more of it than rounding. */
const NOTHING = 1e-11;

/**
 * Appends a row (which it overwrites) with its right-hand side. What is left of the right-hand side is the recursive
 * residual w of this row, with the sign of y - x'b of the rows before; its square is what the row adds to the residual
 * sum of squares. While the rows so far do not span all columns, w is 0 for a row that adds a direction.
 */
export function appendRow({ r, z }: GrowingTriangle, row: Float64Array, y: number): number {
	const k = z.length;
	let size = 0;
	for (let j = 0; j < k; j++) size = Math.max(size, Math.abs(row[j]!));
	let left = y;
	for (let j = 0; j < k; j++) {
		const x = row[j]!;
		const diagonal = r[j * k + j]!;
		if (x === 0 || (diagonal === 0 && Math.abs(x) <= NOTHING * size)) continue;
		const length = Math.hypot(diagonal, x);
		// r_jj >= 0 keeps the cosine non-negative, and with it the sign of what is left.
		const cosine = diagonal / length;
		const sine = x / length;
		r[j * k + j] = length;
		for (let l = j + 1; l < k; l++) {
			const above = r[j * k + l]!;
			r[j * k + l] = cosine * above + sine * row[l]!;
			row[l] = cosine * row[l]! - sine * above;
		}
		const above = z[j]!;
		z[j] = cosine * above + sine * left;
		left = cosine * left - sine * above;
	}
	return left;
}
