/**
 * Householder QR of a column-major matrix (Golub & Van Loan, Matrix Computations, algorithm 5.2.1), without
 * pivoting: the order of the columns carries meaning here, and later columns are judged against earlier ones.
 */
export interface QrFactor {
	readonly rows: number;
	readonly cols: number;
	/** Column-major rows x cols: R strictly above the diagonal, the reflector of column j from row j down. */
	readonly packed: Float64Array;
	/** The diagonal of R; its signs are free. */
	readonly diagonal: Float64Array;
}

/** Factors `matrix` (column-major rows x cols, rows >= cols), which it overwrites. */
export function factorise(matrix: Float64Array, rows: number, cols: number): QrFactor {
	const diagonal = new Float64Array(cols);
	for (let j = 0; j < cols; j++) {
		diagonal[j] = makeReflector(matrix, j * rows, j, rows);
		for (let c = j + 1; c < cols; c++) reflect(matrix, j * rows, j, rows, matrix, c * rows);
	}
	return { rows, cols, packed: matrix, diagonal };
}

/** Turns rows j.. of a column into a reflector v with v'v = 2 v_j and returns the diagonal entry of R. */
function makeReflector(a: Float64Array, at: number, j: number, rows: number): number {
	let squares = 0;
	for (let i = j; i < rows; i++) squares += a[at + i]! * a[at + i]!;
	if (squares === 0) return 0;
	// The sign that avoids cancellation in v_j = a_j / norm + 1.
	const norm = a[at + j]! < 0 ? -Math.sqrt(squares) : Math.sqrt(squares);
	for (let i = j; i < rows; i++) a[at + i]! /= norm;
	a[at + j]! += 1;
	return -norm;
}

/** Applies the reflector stored at `from` (rows j..) to the column of `target` that starts at `to`. */
function reflect(
	a: Float64Array,
	from: number,
	j: number,
	rows: number,
	target: Float64Array,
	to: number
): void {
	const pivot = a[from + j]!;
	if (pivot === 0) return;
	let product = 0;
	for (let i = j; i < rows; i++) product += a[from + i]! * target[to + i]!;
	product = -product / pivot;
	for (let i = j; i < rows; i++) target[to + i]! += product * a[from + i]!;
}

/** Overwrites the column of `target` that starts at `at` (length rows) with Q' times it. */
export function applyTransposedQ(factor: QrFactor, target: Float64Array, at = 0): void {
	for (let j = 0; j < factor.cols; j++) reflect(factor.packed, j * factor.rows, j, factor.rows, target, at);
}

/** The first `cols` columns of Q, column-major rows x cols: an orthonormal basis of the column space. */
export function thinQ(factor: QrFactor): Float64Array {
	const { rows, cols, packed } = factor;
	const basis = new Float64Array(rows * cols);
	for (let c = 0; c < cols; c++) {
		basis[c * rows + c] = 1;
		// Reflectors beyond column c leave the unit vector e_c alone.
		for (let j = c; j >= 0; j--) reflect(packed, j * rows, j, rows, basis, c * rows);
	}
	return basis;
}

/** R, column-major cols x cols, zeros below the diagonal. */
export function triangle(factor: QrFactor): Float64Array {
	const { rows, cols, packed, diagonal } = factor;
	const r = new Float64Array(cols * cols);
	for (let j = 0; j < cols; j++) {
		for (let i = 0; i < j; i++) r[j * cols + i] = packed[j * rows + i]!;
		r[j * cols + j] = diagonal[j]!;
	}
	return r;
}
