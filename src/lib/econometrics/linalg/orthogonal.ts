/** Products with an orthonormal basis Q, column-major n x k. */

/** Q'v, of length k. */
export function coordinates(basis: Float64Array, n: number, k: number, v: Float64Array): Float64Array {
	const c = new Float64Array(k);
	for (let j = 0; j < k; j++) {
		let sum = 0;
		for (let i = 0; i < n; i++) sum += basis[j * n + i]! * v[i]!;
		c[j] = sum;
	}
	return c;
}

/** Takes the part in the span of Q out of v, in place; returns the coordinates taken out. */
export function projectOff(basis: Float64Array, n: number, k: number, v: Float64Array): Float64Array {
	const c = coordinates(basis, n, k, v);
	for (let j = 0; j < k; j++) {
		for (let i = 0; i < n; i++) v[i]! -= c[j]! * basis[j * n + i]!;
	}
	return c;
}

/** Row sums of squares of Q: the leverage of each row. */
export function rowSquares(basis: Float64Array, n: number, k: number): Float64Array {
	const h = new Float64Array(n);
	for (let j = 0; j < k; j++) {
		for (let i = 0; i < n; i++) h[i]! += basis[j * n + i]! * basis[j * n + i]!;
	}
	return h;
}
