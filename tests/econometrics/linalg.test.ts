import { describe, expect, it } from 'vitest';
import fc from 'fast-check';
import { accurateResiduals } from '$lib/econometrics/linalg/compensated';
import { appendRow, emptyTriangle } from '$lib/econometrics/linalg/givens';
import { applyTransposedQ, factorise, thinQ, triangle } from '$lib/econometrics/linalg/householder';
import { coordinates, projectOff, rowSquares } from '$lib/econometrics/linalg/orthogonal';
import { singularValues, symmetricEigenvalues } from '$lib/econometrics/linalg/spectrum';
import { invertUpper, solveTransposed, solveUpper } from '$lib/econometrics/linalg/triangular';
import { dot, mean, norm } from '$lib/econometrics/linalg/vectors';
import { drawNormal, mulberry32 } from '$lib/econometrics/random/mulberry32';

const draw = (seed: number, count: number): Float64Array => {
	const next = mulberry32(seed);
	return Float64Array.from({ length: count }, () => drawNormal(next));
};
const column = (a: Float64Array, rows: number, j: number): Float64Array => a.slice(j * rows, (j + 1) * rows);
const shape = fc.tuple(fc.integer({ min: 1, max: 8 }), fc.integer({ min: 0, max: 30 }), fc.nat(1e6));

describe('Householder QR', () => {
	it('gives an orthonormal basis whose product with the triangle is the matrix', () => {
		fc.assert(
			fc.property(shape, ([k, extra, seed]) => {
				const n = k + extra;
				const a = draw(seed, n * k);
				const factor = factorise(a.slice(), n, k);
				const q = thinQ(factor);
				const r = triangle(factor);
				for (let i = 0; i < k; i++) {
					for (let j = 0; j < k; j++) {
						const product = dot(column(q, n, i), column(q, n, j));
						expect(Math.abs(product - (i === j ? 1 : 0))).toBeLessThan(1e-14);
					}
					const back = new Float64Array(n);
					for (let j = 0; j <= i; j++) for (let t = 0; t < n; t++) back[t]! += q[j * n + t]! * r[i * k + j]!;
					expect(Math.max(...back.map((v, t) => Math.abs(v - a[i * n + t]!)))).toBeLessThan(1e-13);
				}
			})
		);
	});

	it('applies the transposed Q without forming it', () => {
		const a = draw(3, 40);
		const factor = factorise(a, 10, 4);
		const y = draw(4, 10);
		const direct = coordinates(thinQ(factor), 10, 4, y);
		const applied = y.slice();
		applyTransposedQ(factor, applied);
		for (let j = 0; j < 4; j++) expect(applied[j]).toBeCloseTo(direct[j]!, 13);
		expect(norm(applied)).toBeCloseTo(norm(y), 13);
	});

	it('leaves a diagonal of rounding for a collinear column', () => {
		const a = draw(5, 30);
		for (let t = 0; t < 10; t++) a[20 + t] = a[t]! + a[10 + t]!;
		expect(Math.abs(factorise(a, 10, 3).diagonal[2]!)).toBeLessThan(1e-14);
	});
});

describe('triangular systems', () => {
	it('solve forwards, backwards and invert', () => {
		const r = Float64Array.from([2, 0, 0, 1, 4, 0, -1, 3, 5]);
		const b = Float64Array.from([1, 2, 3]);
		const x = solveUpper(r, 3, b);
		expect([2 * x[0]! + x[1]! - x[2]!, 4 * x[1]! + 3 * x[2]!, 5 * x[2]!]).toEqual([1, 2, 3]);
		const u = solveTransposed(r, 3, b);
		expect([2 * u[0]!, u[0]! + 4 * u[1]!, -u[0]! + 3 * u[1]! + 5 * u[2]!].map((v) => +v.toFixed(12))).toEqual(
			[1, 2, 3]
		);
		const inverse = invertUpper(r, 3);
		expect(inverse[0]).toBe(0.5);
		expect(inverse[3 + 0]).toBe(-0.125);
		expect(inverse[6 + 2]).toBe(0.2);
	});
});

describe('projection', () => {
	it('splits a vector into coordinates and a rest orthogonal to the basis', () => {
		const q = thinQ(factorise(draw(8, 60), 20, 3));
		const v = draw(9, 20);
		const before = dot(v, v);
		const c = projectOff(q, 20, 3, v);
		expect(dot(c, c) + dot(v, v)).toBeCloseTo(before, 12);
		expect(Math.abs(coordinates(q, 20, 3, v)[1]!)).toBeLessThan(1e-14);
		expect(rowSquares(q, 20, 3).reduce((s, h) => s + h, 0)).toBeCloseTo(3, 13);
	});
});

describe('Givens recursion', () => {
	it('ends with the triangle of the whole matrix, up to signs', () => {
		const a = draw(11, 90);
		const grown = emptyTriangle(3);
		for (let t = 0; t < 30; t++) appendRow(grown, Float64Array.from([a[t]!, a[30 + t]!, a[60 + t]!]), 0);
		const r = triangle(factorise(a.slice(), 30, 3));
		for (let i = 0; i < 3; i++)
			for (let j = i; j < 3; j++)
				expect(grown.r[i * 3 + j]).toBeCloseTo(Math.sign(r[i * 3 + i]!) * r[j * 3 + i]!, 12);
	});

	it('waits for a direction that the first rows do not have', () => {
		const grown = emptyTriangle(2);
		expect(appendRow(grown, Float64Array.from([1, 0]), 3)).toBe(0);
		expect(appendRow(grown, Float64Array.from([1, 0]), 5)).toBeCloseTo(Math.SQRT2, 14);
		expect(appendRow(grown, Float64Array.from([1, 1]), 100)).toBe(0);
	});
});

describe('accurate residuals', () => {
	it('keep what a plain difference loses', () => {
		const big = 2 ** 40 + 1;
		const x = Float64Array.from([big]);
		const b = Float64Array.from([big]);
		// big^2 = 2^80 + 2^41 + 1: the last 1 is below the last digit of the product.
		const y = Float64Array.from([2 ** 80 + 2 ** 41]);
		expect(y[0]! - b[0]! * x[0]!).toBe(0);
		expect(accurateResiduals(y, [x], b)[0]).toBe(-1);
	});
});

describe('spectra', () => {
	it('agree with matrices whose values are known', () => {
		const s = singularValues(Float64Array.from([3, 0, 0, 0, 4, 0]), 3, 2);
		expect(s[0]).toBeCloseTo(4, 14);
		expect(s[1]).toBeCloseTo(3, 14);
		expect(symmetricEigenvalues(Float64Array.from([2, 1, 1, 2]), 2).map((v) => +v.toFixed(13))).toEqual([
			1, 3
		]);
	});
});

describe('means and lengths', () => {
	it('do not overflow and take rounding back', () => {
		expect(norm(Float64Array.from([3e200, 4e200]))).toBeCloseTo(5e200, -187);
		expect(mean(new Float64Array(1000).fill(0.1))).toBe(0.1);
		expect(norm(new Float64Array(3))).toBe(0);
	});
});
