import type { Design } from '../series/design';
import { isRefusal, refuse, type Refusal } from '../refusal';
import { coordinates, projectOff } from '../linalg/orthogonal';
import { accurateResiduals } from '../linalg/compensated';
import { centred, maxAbs, sumOfSquares } from '../linalg/vectors';
import { orthogonalise, type Orthogonal } from './orthogonalise';

/** Estimates without inference. `basis` is Q (column-major n x k), `inverseFactor` G: (X'X)^-1 = G G'. */
export interface LeastSquares extends Orthogonal {
	readonly nobs: number;
	readonly k: number;
	readonly names: readonly string[];
	readonly coef: Float64Array;
	/** Sum of squared residuals. */
	readonly rss: number;
	/** Sum of squares of y about its mean, also without a constant. */
	readonly tss: number;
	readonly resid: Float64Array;
	readonly fitted: Float64Array;
	readonly design: Design;
	readonly y: Float64Array;
}

const LARGEST = 1e150;
const SMALLEST = 1e-150;

/**
 * Ordinary least squares of y on the columns of a design. A perfect fit is allowed here (its estimates mean
 * something, its tests do not). Refuses `non-finite`, `domain` (magnitudes outside 1e-150..1e150), `constant`,
 * `too-short` (n <= k) and `rank`.
 */
export function leastSquares(y: Float64Array, design: Design): LeastSquares | Refusal {
	const refusal = unusable(y, design);
	if (refusal) return refusal;
	const factor = orthogonalise(design, y.length);
	if (isRefusal(factor)) return factor;
	return solve(y, design, factor);
}

/** The smallest and largest of an array differ by no more than rounding. */
export function isConstant(values: Float64Array): boolean {
	let least = Infinity;
	let most = -Infinity;
	for (const value of values) {
		least = Math.min(least, value);
		most = Math.max(most, value);
	}
	return most - least <= 1e-12 * maxAbs(values);
}

/** Least squares of y with a factor of its design at hand. */
function solve(y: Float64Array, design: Design, factor: Orthogonal): LeastSquares {
	const n = y.length;
	const k = design.names.length;
	// A power of two: scaling is exact and keeps squares inside the range of doubles.
	const scale = 2 ** Math.floor(Math.log2(maxAbs(y)));
	const scaled = y.map((value) => value / scale);
	const coef = multiply(factor.inverseFactor, k, coordinates(factor.basis, n, k, scaled));
	const resid = accurateResiduals(scaled, design.columns, coef);
	// One step of refinement: what the residual still has in the span belongs to the coefficients.
	const correction = multiply(factor.inverseFactor, k, projectOff(factor.basis, n, k, resid));
	for (let j = 0; j < k; j++) coef[j] = (coef[j]! + correction[j]!) * scale;
	const rss = sumOfSquares(resid) * scale * scale;
	const tss = sumOfSquares(centred(scaled)) * scale * scale;
	for (let i = 0; i < n; i++) resid[i]! *= scale;
	const fitted = y.map((value, i) => value - resid[i]!);
	return Object.freeze({
		...factor,
		nobs: n,
		k,
		names: design.names,
		coef,
		rss,
		tss,
		resid,
		fitted,
		design,
		y
	});
}

function multiply(g: Float64Array, k: number, v: Float64Array): Float64Array {
	const product = new Float64Array(k);
	for (let j = 0; j < k; j++) for (let i = 0; i < k; i++) product[i]! += g[j * k + i]! * v[j]!;
	return product;
}

function unusable(y: Float64Array, design: Design): Refusal | undefined {
	const n = y.length;
	const k = design.columns.length;
	if (n - k < 1) return refuse('too-short', `${n} rows are too few for ${k} coefficients.`);
	const series: [string, Float64Array][] = [['the dependent variable', y]];
	for (const [j, column] of design.columns.entries()) series.push([design.names[j]!, column]);
	for (const [name, values] of series) {
		const bad = values.findIndex((value) => !Number.isFinite(value));
		if (bad >= 0)
			return refuse('non-finite', `The value of ${name} in row ${bad + 1} is not a finite number.`);
		const size = maxAbs(values);
		if (size > LARGEST || (size < SMALLEST && size > 0))
			return refuse('domain', `The values of ${name} are outside 1e-150 to 1e150; choose another unit.`);
	}
	return isConstant(y) ? refuse('constant', 'The dependent variable does not vary.') : undefined;
}
