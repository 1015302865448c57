/** Solves with an upper triangular R (column-major k x k, non-zero diagonal). */

/** The solution x of R x = b. */
export function solveUpper(r: Float64Array, k: number, b: Float64Array): Float64Array {
	const x = b.slice(0, k);
	for (let j = k - 1; j >= 0; j--) {
		const value = x[j]! / r[j * k + j]!;
		x[j] = value;
		for (let i = 0; i < j; i++) x[i]! -= value * r[j * k + i]!;
	}
	return x;
}

/** The solution x of R'x = b. */
export function solveTransposed(r: Float64Array, k: number, b: Float64Array): Float64Array {
	const x = new Float64Array(k);
	for (let j = 0; j < k; j++) {
		let sum = b[j]!;
		for (let i = 0; i < j; i++) sum -= r[j * k + i]! * x[i]!;
		x[j] = sum / r[j * k + j]!;
	}
	return x;
}

/** R^-1, column-major k x k, upper triangular. */
export function invertUpper(r: Float64Array, k: number): Float64Array {
	const inverse = new Float64Array(k * k);
	const unit = new Float64Array(k);
	for (let j = 0; j < k; j++) {
		unit.fill(0);
		unit[j] = 1;
		inverse.set(solveUpper(r, k, unit), j * k);
	}
	return inverse;
}
