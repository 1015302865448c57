import { centred } from '../linalg/vectors';

/** `v` less its mean (c), or less its least-squares line in time (ct). */
export function detrend(v: Float64Array, det: 'c' | 'ct'): Float64Array {
	const e = centred(v);
	if (det === 'c') return e;
	const middle = (v.length - 1) / 2;
	let slope = 0;
	let squares = 0;
	for (let t = 0; t < v.length; t++) {
		slope += (t - middle) * e[t]!;
		squares += (t - middle) ** 2;
	}
	slope /= squares;
	for (let t = 0; t < v.length; t++) e[t]! -= slope * (t - middle);
	return e;
}
