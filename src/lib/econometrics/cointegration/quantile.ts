/** Quantile of a sample by linear interpolation at h = (n - 1) q (type 7 of Hyndman & Fan 1996, Am. Statistician 50). */
export function quantile(sample: Float64Array, q: number): number {
	const sorted = sample.slice().sort();
	const h = (sorted.length - 1) * q;
	const low = Math.floor(h);
	const high = Math.min(low + 1, sorted.length - 1);
	return sorted[low]! + (h - low) * (sorted[high]! - sorted[low]!);
}
