/** Sums over typed arrays, in index order so that a figure is the same on every machine. */

export function dot(a: Float64Array, b: Float64Array): number {
	let sum = 0;
	for (let i = 0; i < a.length; i++) sum += a[i]! * b[i]!;
	return sum;
}

export const sumOfSquares = (a: Float64Array): number => dot(a, a);

export function sum(a: Float64Array): number {
	let total = 0;
	for (let i = 0; i < a.length; i++) total += a[i]!;
	return total;
}

/** Arithmetic mean; the second pass takes back what rounding lost in the first. */
export function mean(a: Float64Array): number {
	const first = sum(a) / a.length;
	let rest = 0;
	for (let i = 0; i < a.length; i++) rest += a[i]! - first;
	return first + rest / a.length;
}

/** Largest absolute value; 0 for an empty array. */
export function maxAbs(a: Float64Array): number {
	let largest = 0;
	for (let i = 0; i < a.length; i++) largest = Math.max(largest, Math.abs(a[i]!));
	return largest;
}

/** The deviations from the mean. */
export function centred(a: Float64Array): Float64Array {
	const m = mean(a);
	return a.map((value) => value - m);
}

/** Euclidean length, safe for values whose squares leave the range of doubles. */
export function norm(a: Float64Array): number {
	const largest = maxAbs(a);
	if (largest === 0) return 0;
	let squares = 0;
	for (let i = 0; i < a.length; i++) squares += (a[i]! / largest) ** 2;
	return largest * Math.sqrt(squares);
}
