/**
 * The upper triangle R with R'R = A for a symmetric positive definite A, both column-major k x k (Golub & Van Loan, Matrix
 * Computations, section 4.2), on the correlation scale so that units do not matter; undefined when a pivot is within
 * 1e-12 of 0, that is, A is singular or not definite.
 */
export function cholesky(a: Float64Array, k: number): Float64Array | undefined {
	const r = new Float64Array(k * k);
	const scale = new Float64Array(k);
	for (let j = 0; j < k; j++) {
		if (!(a[j * k + j]! > 0)) return undefined;
		scale[j] = Math.sqrt(a[j * k + j]!);
	}
	for (let j = 0; j < k; j++) {
		for (let i = 0; i <= j; i++) {
			let rest = a[j * k + i]! / scale[i]! / scale[j]!;
			for (let l = 0; l < i; l++) rest -= r[i * k + l]! * r[j * k + l]!;
			if (i < j) r[j * k + i] = rest / r[i * k + i]!;
			else if (rest > 1e-12) r[j * k + j] = Math.sqrt(rest);
			else return undefined;
		}
	}
	for (let j = 0; j < k; j++) for (let i = 0; i <= j; i++) r[j * k + i]! *= scale[j]!;
	return r;
}
