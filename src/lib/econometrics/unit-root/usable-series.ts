import { maxAbs } from '../linalg/vectors';
import { refuse, type Refusal } from '../refusal';
import { isConstant } from '../regression/least-squares';

const LARGEST = 1e150;
const SMALLEST = 1e-150;

/** Refuses a series with a value that is not finite, of a size that squares cannot hold, or that does not vary. */
export function refuseSeries(v: Float64Array): Refusal | null {
	const bad = v.findIndex((value) => !Number.isFinite(value));
	if (bad >= 0) return refuse('non-finite', `observation ${bad + 1} is not a finite number`);
	if (v.length < 3) return refuse('too-short', `${v.length} observations; at least 3 are needed`);
	if (isConstant(v)) return refuse('constant', 'the series does not vary');
	const size = maxAbs(v);
	if (size > LARGEST || size < SMALLEST)
		return refuse('domain', 'the values are outside 1e-150 to 1e150; choose another unit');
	return null;
}

/**
 * The series divided by the power of two that brings it near 1, and its logarithm: dividing by a power of two is
 * exact, so every ratio stays what it was to the last digit.
 */
export function toUnitSize(v: Float64Array): { readonly values: Float64Array; readonly logScale: number } {
	const exponent = Math.floor(Math.log2(maxAbs(v)));
	const scale = 2 ** exponent;
	return { values: v.map((value) => value / scale), logScale: exponent * Math.LN2 };
}
