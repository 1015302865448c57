/**
 * P(sum l_i z_i^2 / sum z_i^2 <= x) for independent standard normal z: Pan's procedure in the form of Farebrother
 * (1980, 1984, Applied Statistics 29, 224-227, and 33, 363-366; algorithm AS 153, remark R52). `weights` ascending. With
 * few nodes the sum may leave [0, 1] when there are many weights; and its terms alternate, so that near 100 weights only
 * about four digits are left whatever the number of nodes.
 */
export function weightedSumBelow(x: number, weights: readonly number[], nodes: number): number {
	const m = weights.length;
	let nu = weights.filter((weight) => weight < x).length;
	if (nu === 0) return 0;
	if (nu === m) return 1;
	// a[0] = x, a[1..m] the weights, as in the published algorithm.
	const a = [x, ...weights];
	const half = m - nu;
	const low = half >= nu;
	const d = low ? 2 : -2;
	const kk = low ? -1 : 1;
	let [j1, j2, j3, j4] = low ? [0, 2, 3, 1] : [m - 2, m - 1, m + 1, m];
	nu = low ? nu : nu + 1;
	const h = low ? nu : half;
	let sum = (kk + 1) / 2;
	let sign = kk / nodes;
	for (let l1 = h % 2; l1 >= 0; l1--) {
		for (let l2 = j2; low ? l2 <= nu : l2 >= nu; l2 += d) {
			sign = -sign;
			sum += sign * integral(a, l2, j1, j3, j4, nodes);
			j1 += d;
			j3 += d;
			j4 += d;
		}
		if (d === 2) j3--;
		else j1++;
		j2 = 0;
		nu = 0;
	}
	return sum;
}

/** The sum over the nodes between two neighbouring weights. */
function integral(
	a: readonly number[],
	l2: number,
	j1: number,
	j3: number,
	j4: number,
	nodes: number
): number {
	const u = (a[j4]! + a[l2]!) / 2;
	const v = (a[j4]! - a[l2]!) / 2;
	let total = 0;
	for (let i = 1; i < 2 * nodes; i += 2) {
		const y = u - v * Math.cos((i * Math.PI) / (2 * nodes));
		const g = y - a[0]!;
		let product = 1;
		for (let c = 1; c <= j1; c++) product *= g / (y - a[c]!);
		for (let c = j3; c < a.length; c++) product *= g / (y - a[c]!);
		total += Math.sqrt(Math.abs(product));
	}
	return total;
}
