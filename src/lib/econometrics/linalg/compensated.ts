/**
 * y - Xb with twice the working precision, rounded once at the end: the residual of iterative refinement (Ogita,
 * Rump & Oishi 2005, SIAM J. Sci. Comput. 26, 1955-1988; the splitting is Dekker's, 1971). Values must stay below
 * 1e150, so that no intermediate product overflows.
 */
export function accurateResiduals(
	y: Float64Array,
	columns: readonly Float64Array[],
	coef: Float64Array
): Float64Array {
	const high = y.slice();
	const low = new Float64Array(y.length);
	for (const [j, column] of columns.entries()) subtractProduct(high, low, column, coef[j]!);
	for (let i = 0; i < high.length; i++) high[i]! += low[i]!;
	return high;
}

const SPLITTER = 134217729;

/** Takes b times the column out of the unevaluated sum high + low. */
function subtractProduct(high: Float64Array, low: Float64Array, column: Float64Array, b: number): void {
	const bScaled = SPLITTER * b;
	const bHigh = bScaled - (bScaled - b);
	const bLow = b - bHigh;
	for (let i = 0; i < high.length; i++) {
		const x = column[i]!;
		const xScaled = SPLITTER * x;
		const xHigh = xScaled - (xScaled - x);
		const xLow = x - xHigh;
		const product = -b * x;
		// What rounding took from the product, and then from the sum, exactly.
		const productError = -(bLow * xLow - (-product - bHigh * xHigh - bLow * xHigh - bHigh * xLow));
		const before = high[i]!;
		const after = before + product;
		const back = after - before;
		low[i]! += before - (after - back) + (product - back) + productError;
		high[i] = after;
	}
}
