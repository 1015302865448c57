import { centred, sumOfSquares } from '../linalg/vectors';

/** Autocorrelations r_1 .. r_lags about the mean, divisor the whole sum of squares (Box & Jenkins 1970). */
export function autocorrelations(v: Float64Array, lags: number): Float64Array {
	const deviations = centred(v);
	const total = sumOfSquares(deviations);
	return Float64Array.from({ length: lags }, (_, l) => {
		let sum = 0;
		for (let t = l + 1; t < v.length; t++) sum += deviations[t]! * deviations[t - l - 1]!;
		return sum / total;
	});
}
