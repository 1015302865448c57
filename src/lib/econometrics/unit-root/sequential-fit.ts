import { refuse, type Refusal } from '../refusal';
import { applyTransposedQ, factorise } from '../linalg/householder';
import { centred, norm, sumOfSquares } from '../linalg/vectors';

/** Least squares seen column by column: what each regressor adds after those before it. */
export interface SequentialFit {
	readonly nobs: number;
	readonly k: number;
	/** Q'y for the k columns: the rss of the first j columns is rss + the sum of the squares from j on. */
	readonly coordinates: Float64Array;
	readonly rss: number;
	/** The last column in the full regression. */
	readonly last: { readonly coef: number; readonly se: number; readonly t: number };
}

/**
 * Regresses y on `columns` by one Householder factorisation in the given order. Refuses a column within 1e-10 of
 * the span of those before it, n - k < 1 and an exact fit.
 */
export function sequentialFit(
	y: Float64Array,
	columns: readonly Float64Array[],
	names: readonly string[]
): SequentialFit | Refusal {
	const n = y.length;
	const k = columns.length;
	if (n - k < 1) return refuse('too-short', `${n} rows for ${k} regressors; at least ${k + 1} are needed`);
	const packed = new Float64Array(n * k);
	let scale = 1;
	for (let j = 0; j < k; j++) {
		scale = norm(columns[j]!);
		if (scale === 0) return refuse('rank', `${names[j]} is zero in every row`);
		for (let i = 0; i < n; i++) packed[j * n + i] = columns[j]![i]! / scale;
	}
	const factor = factorise(packed, n, k);
	for (let j = 0; j < k; j++) {
		if (Math.abs(factor.diagonal[j]!) <= 1e-10)
			return refuse('rank', `${names[j]} is a combination of ${names.slice(0, j).join(', ')}`);
	}
	const rotated = y.slice();
	applyTransposedQ(factor, rotated);
	let rss = 0;
	for (let i = k; i < n; i++) rss += rotated[i]! * rotated[i]!;
	if (rss <= 1e-20 * sumOfSquares(centred(y)))
		return refuse('perfect-fit', 'the regressors fit the series exactly');
	const diagonal = factor.diagonal[k - 1]!;
	const sigma = Math.sqrt(rss / (n - k));
	const coordinates = rotated.slice(0, k);
	const last = Object.freeze({
		coef: coordinates[k - 1]! / (diagonal * scale),
		se: sigma / (Math.abs(diagonal) * scale),
		t: (coordinates[k - 1]! * Math.sign(diagonal)) / sigma
	});
	return Object.freeze({ nobs: n, k, coordinates, rss, last });
}

/** Rss of the regression on the first `columns` columns only. */
export function leadingRss(fit: SequentialFit, columns: number): number {
	let rss = fit.rss;
	for (let j = fit.k - 1; j >= columns; j--) rss += fit.coordinates[j]! ** 2;
	return rss;
}
