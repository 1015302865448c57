/**
 * Least squares of few columns from sums of products, for the inside of a bootstrap: columns are deviations
 * without a level far from 0, so the sums lose nothing. One scratch for all replications.
 */
export class SmallRegression {
	private readonly columns: Float64Array[];
	private readonly factor: Float64Array;
	private readonly z: Float64Array;

	/** `k` columns, to be filled by the caller, of `n` rows. */
	constructor(
		private readonly n: number,
		private readonly k: number
	) {
		this.columns = Array.from({ length: k }, () => new Float64Array(n));
		this.factor = new Float64Array(k * k);
		this.z = new Float64Array(k);
	}

	column(j: number): Float64Array {
		return this.columns[j]!;
	}

	/** Rss of y on the columns and the t-ratio of the last, with `df` degrees of freedom; t is 0 when singular. */
	solve(y: Float64Array, df: number): { readonly rss: number; readonly t: number } {
		let rss = product(y, y, this.n);
		for (let j = 0; j < this.k; j++) {
			let diagonal = product(this.columns[j]!, this.columns[j]!, this.n);
			let right = product(this.columns[j]!, y, this.n);
			for (let i = 0; i < j; i++) {
				let entry = product(this.columns[i]!, this.columns[j]!, this.n);
				for (let c = 0; c < i; c++) entry -= this.factor[i * this.k + c]! * this.factor[j * this.k + c]!;
				entry /= this.factor[i * this.k + i]!;
				this.factor[j * this.k + i] = entry;
				diagonal -= entry * entry;
				right -= entry * this.z[i]!;
			}
			if (!(diagonal > 0)) return { rss, t: 0 };
			this.factor[j * this.k + j] = Math.sqrt(diagonal);
			this.z[j] = right / this.factor[j * this.k + j]!;
			rss -= this.z[j]! ** 2;
		}
		return { rss, t: this.k === 0 ? 0 : this.z[this.k - 1]! / Math.sqrt(rss / df) };
	}
}

function product(a: Float64Array, b: Float64Array, n: number): number {
	let sum = 0;
	for (let i = 0; i < n; i++) sum += a[i]! * b[i]!;
	return sum;
}
