import { describe, expect, it } from 'vitest';
import { drawIndex, drawNormal, drawSign, mulberry32 } from '$lib/econometrics/random/mulberry32';

describe('mulberry32', () => {
	it('gives the known first draws of seed 12345', () => {
		const next = mulberry32(12345);
		expect([next(), next(), next()]).toEqual([0.9797282677609473, 0.3067522644996643, 0.484205421525985]);
	});

	it('can be entered anywhere', () => {
		const whole = mulberry32(7);
		const draws = Array.from({ length: 1000 }, () => whole());
		const later = mulberry32(7, 640);
		expect(Array.from({ length: 360 }, () => later())).toEqual(draws.slice(640));
	});

	it('draws indices, signs and normals from the same stream', () => {
		expect(drawIndex(mulberry32(12345), 100)).toBe(97);
		expect(drawSign(mulberry32(12345))).toBe(1);
		const zero = () => 0;
		expect(drawNormal(zero)).toBeCloseTo(Math.sqrt(2 * 32 * Math.LN2), 12);
	});

	it('normal draws have mean 0, variance 1 and kurtosis 3', () => {
		const next = mulberry32(1);
		const n = 200_000;
		const sums = [0, 0, 0];
		for (let i = 0; i < n; i++) {
			const z = drawNormal(next);
			sums[0]! += z / n;
			sums[1]! += (z * z) / n;
			sums[2]! += z ** 4 / n;
		}
		expect(Math.abs(sums[0]!)).toBeLessThan(0.01);
		expect(Math.abs(sums[1]! - 1)).toBeLessThan(0.01);
		expect(Math.abs(sums[2]! - 3)).toBeLessThan(0.1);
	});
});
