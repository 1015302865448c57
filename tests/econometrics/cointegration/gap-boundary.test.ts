import { describe, expect, it } from 'vitest';
import { gapBoundary } from '$lib/econometrics/cointegration/gap-boundary';
import { made, noise, reasonOf } from '../simulated';

const options = { known: 80, scale: 8, levels: [0.05, 0.01] } as const;

function gapOf(seed: number, shift: number): Float64Array {
	const shocks = noise(seed, 100);
	const gap = new Float64Array(100);
	for (let t = 1; t < 100; t++) gap[t] = 0.7 * gap[t - 1]! + shocks[t]!;
	return gap.map((value, t) => (t >= 80 ? value + shift : value));
}

describe('boundary of a held gap', () => {
	it('is crossed rarely while the relation stands and mostly when it has moved', () => {
		let query = 0;
		let fails = 0;
		let found = 0;
		for (let i = 0; i < 300; i++) {
			const still = made(gapBoundary(gapOf(60_000 + i, 0), options)).lines;
			if (still[0]!.crossed !== null) query++;
			if (still[1]!.crossed !== null) fails++;
			if (made(gapBoundary(gapOf(60_000 + i, 6), options)).lines[0]!.crossed !== null) found++;
		}
		expect(query / 300).toBeLessThan(0.1);
		expect(fails).toBeLessThanOrEqual(query);
		expect(found / 300).toBeGreaterThan(0.7);
	});

	it('has the lines of the formula and names the first period outside', () => {
		const { lines, path } = made(gapBoundary(gapOf(1, 25), options));
		expect(lines[0]!.boundary[0]).toBeCloseTo(
			Math.sqrt((81 / 80) * 9 * (-2 * Math.log(0.05) + Math.log(9 / 8))),
			12
		);
		const first = lines[0]!.crossed!;
		expect(Math.abs(path[first - 1]!)).toBeGreaterThan(lines[0]!.boundary[first - 1]!);
		expect(lines[1]!.crossed!).toBeGreaterThanOrEqual(first);
	});

	it('needs a new period and enough before it', () => {
		expect(reasonOf(gapBoundary(gapOf(1, 0), { ...options, known: 100 }))).toBe('too-short');
		expect(reasonOf(gapBoundary(gapOf(1, 0), { ...options, known: 5 }))).toBe('too-short');
		expect(reasonOf(gapBoundary(gapOf(1, 0).fill(0, 0, 80), options))).toBe('constant');
	});

	it('holds a nearly explosive gap at a persistence of .97', () => {
		const trending = Float64Array.from({ length: 100 }, (_, t) => 1.02 ** t + 0.01 * Math.sin(t));
		expect(made(gapBoundary(trending, options)).persistence).toBe(0.97);
	});
});
