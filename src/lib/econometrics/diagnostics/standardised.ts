import { centred, sumOfSquares } from '../linalg/vectors';

/** A column with mean 0 and standard deviation 1: powers of it stay far from collinear. */
export function standardised(v: Float64Array): Float64Array {
	const deviations = centred(v);
	const sd = Math.sqrt(sumOfSquares(deviations) / (v.length - 1));
	return deviations.map((value) => value / sd);
}
