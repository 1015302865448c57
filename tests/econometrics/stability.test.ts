import { describe, expect, it } from 'vitest';
import fc from 'fast-check';
import { drawNormal, mulberry32 } from '$lib/econometrics/random/mulberry32';
import { leastSquares } from '$lib/econometrics/regression/least-squares';
import { ols, type OlsFit } from '$lib/econometrics/regression/ols';
import { designOf } from '$lib/econometrics/series/design';
import { constant, indicator } from '$lib/econometrics/series/deterministic';
import { chow, predictiveChow } from '$lib/econometrics/stability/chow';
import { cusum, cusumP, CUSUM_BOUNDARY } from '$lib/econometrics/stability/cusum';
import { cusumOfSquares } from '$lib/econometrics/stability/cusum-of-squares';
import { hansenP } from '$lib/econometrics/stability/hansen-p';
import { harveyCollier } from '$lib/econometrics/stability/harvey-collier';
import { nyblomHansen } from '$lib/econometrics/stability/nyblom-hansen';
import { kolmogorovP, olsCusum } from '$lib/econometrics/stability/ols-cusum';
import { recursiveResiduals } from '$lib/econometrics/stability/recursive-residuals';
import { scoreSupF } from '$lib/econometrics/stability/score-sup-f';
import { supF } from '$lib/econometrics/stability/sup-f';
import {
	recursiveCoefficients,
	rollingCoefficients,
	usualWindow
} from '$lib/econometrics/stability/windowed-coefficients';
import { apart, drawSample, must, rowsOf, withColumn, type Sample } from './sample';

const fitOf = ({ y, design }: Sample): OlsFit => must(ols(y, design));
const size = fc.record({
	seed: fc.nat(1e6),
	n: fc.integer({ min: 20, max: 60 }),
	k: fc.integer({ min: 1, max: 5 })
});

/**
 * Recursive residuals by their definition: a fit of the rows before, and the variance of the prediction error. The first
 * one would need an exact fit of k rows; it is covered by the sum of squares.
 */
function byRefits(sample: Sample, k: number): number[] {
	const { y, design } = sample;
	const out: number[] = [];
	for (let t = k + 1; t < y.length; t++) {
		const x = design.columns.map((column) => column[t]!);
		const before = rowsOf(sample, 0, t);
		const fit = must(leastSquares(before.y, before.design));
		let leverage = 0;
		for (let c = 0; c < k; c++) {
			const part = x.reduce((sum, value, j) => sum + value * fit.inverseFactor[c * k + j]!, 0);
			leverage += part * part;
		}
		out.push((y[t]! - x.reduce((sum, value, j) => sum + value * fit.coef[j]!, 0)) / Math.sqrt(1 + leverage));
	}
	return out;
}

describe('recursive residuals', () => {
	it('from appended rows equal those from refits, in size and sign', () => {
		fc.assert(
			fc.property(size, ({ seed, n, k }) => {
				const sample = drawSample(seed, n, k);
				const fit = fitOf(sample);
				const { w, first } = must(recursiveResiduals(fit));
				expect(first).toBe(k + 1);
				for (const [i, value] of byRefits(sample, k).entries())
					expect(Math.abs(w[i + 1]! - value)).toBeLessThan(1e-8 * fit.sigma);
				expect(
					apart(
						w.reduce((sum, v) => sum + v * v, 0),
						fit.rss
					)
				).toBeLessThan(1e-11);
			})
		);
	});

	it('do not depend on the units of y and of the regressors', () => {
		const sample = drawSample(3, 40, 4);
		const columns = sample.design.columns.map((column, j) => column.map((x) => x * 10 ** (8 * (j - 1))));
		const scaled = fitOf({ y: sample.y.map((v) => v * 1e8), design: { ...sample.design, columns } });
		const a = must(recursiveResiduals(fitOf(sample))).w;
		const b = must(recursiveResiduals(scaled)).w;
		a.forEach((w, i) => expect(apart(w * 1e8, b[i]!)).toBeLessThan(1e-8));
	});

	it('are refused when a dummy is not yet switched on in the first rows', () => {
		const late = withColumn(drawSample(3, 40, 3), 'D', indicator('D', 30, 39, 40).column);
		const fit = fitOf(late);
		for (const refusal of [recursiveResiduals(fit), cusum(fit), cusumOfSquares(fit), harveyCollier(fit)])
			expect(refusal).toMatchObject({
				refused: 'first-rows',
				detail: expect.stringContaining('D') as string
			});
	});
});

describe('CUSUM', () => {
	const fit = fitOf(drawSample(12, 80, 3));

	it('has the path, the bound and the statistic of each other', () => {
		const c = must(cusum(fit));
		expect(c.path).toHaveLength(77);
		expect(c.bound[76]).toBe(3);
		expect(c.stat).toBe(Math.max(...c.path.map((v, j) => Math.abs(v) / c.bound[j]!)));
		expect(c.crosses5).toBe(c.path.some((v, j) => Math.abs(v) > CUSUM_BOUNDARY['5%'] * c.bound[j]!));
	});

	it('gives p = 5 % at the published 5 % slope, and is continuous where the formula changes', () => {
		expect(cusumP(0.948)).toBeCloseTo(0.05, 3);
		expect(cusumP(1.143)).toBeCloseTo(0.01, 3);
		expect(cusumP(0.85)).toBeCloseTo(0.1, 3);
		expect(Math.abs(cusumP(0.2999999) - cusumP(0.3))).toBeLessThan(1e-3);
		expect(cusumP(0)).toBe(1);
		expect(cusumP(6)).toBeGreaterThan(0);
	});

	it('sees a shift of the mean, and its squares a change of the variance', () => {
		const next = mulberry32(5);
		const z = Float64Array.from({ length: 100 }, () => drawNormal(next));
		const design = designOf([constant(100)]);
		const shifted = fitOf({ design, y: z.map((v, t) => v + (t >= 40 ? 1.5 : 0)) });
		const louder = fitOf({ design, y: z.map((v, t) => v * (t >= 50 ? 3 : 1)) });
		expect(must(cusum(shifted)).p).toBeLessThan(0.01);
		expect(olsCusum(shifted).p).toBeLessThan(0.001);
		expect(must(harveyCollier(shifted)).p).toBeLessThan(0.001);
		expect(must(cusum(fitOf({ design, y: z }))).p).toBeGreaterThan(0.05);
		const squares = must(cusumOfSquares(louder));
		expect(squares.maxDeviation).toBeGreaterThan(squares.critical[4]!);
		expect(squares).toMatchObject({ side: 'below', pBetween: [0, 0.01], pApproximate: null });
		const quiet = must(cusumOfSquares(fitOf({ design, y: z })));
		expect(quiet).toMatchObject({ pBetween: [0.2, 1], pApproximate: null });
	});

	it('interpolates the level of the squares between the tabulated ones', () => {
		for (let seed = 0; seed < 200; seed++) {
			const c = must(cusumOfSquares(fitOf(drawSample(seed, 40, 2))));
			if (c.pApproximate === null) continue;
			expect(c.pApproximate).toBeGreaterThanOrEqual(c.pBetween[0]);
			expect(c.pApproximate).toBeLessThanOrEqual(c.pBetween[1]);
			return;
		}
		expect.unreachable('no sample fell between two levels');
	});

	it('has the limit distribution of the ordinary residuals', () => {
		expect(kolmogorovP(1.3581)).toBeCloseTo(0.05, 4);
		expect(kolmogorovP(1.6276)).toBeCloseTo(0.01, 4);
		expect(kolmogorovP(0.05)).toBe(1);
		const path = olsCusum(fit).path;
		expect(Math.abs(path[path.length - 1]!)).toBeLessThan(1e-12);
	});
});

describe('breaks', () => {
	it('sup-F is the largest of the Chow statistics of all dates', () => {
		fc.assert(
			fc.property(size, ({ seed, n, k }) => {
				const fit = fitOf(drawSample(seed, n, k));
				const all = must(supF(fit));
				all.path.forEach((f, i) => {
					const one = must(chow(fit, all.from + i));
					expect(Math.abs(f - k * one.f)).toBeLessThan(1e-8 * Math.max(1, f));
				});
				expect(all.sup.stat).toBe(all.path[all.breakIndex - all.from]);
			})
		);
	});

	it('counts a dummy only in the part where it varies', () => {
		const pulsed = withColumn(drawSample(8, 60, 3), 'D', indicator('D', 45, 45, 60).column);
		const fit = fitOf(pulsed);
		const all = must(supF(fit));
		const b = 30;
		const plain = (from: number, to: number) => {
			const rows = rowsOf(pulsed, from, to);
			const used = rows.design.columns.flatMap((column, j) =>
				new Set(column).size > 1 || j === 0 ? [j] : []
			);
			return must(
				leastSquares(rows.y, {
					names: used.map((j) => rows.design.names[j]!),
					columns: used.map((j) => rows.design.columns[j]!)
				})
			).rss;
		};
		const apartRss = plain(0, b) + plain(b, 60);
		expect(apart(all.path[b - all.from]!, (fit.rss - apartRss) / (apartRss / 52))).toBeLessThan(1e-9);
	});

	it('finds the date of a break', () => {
		const { y, design } = drawSample(4, 100, 2);
		const broken = fitOf({ design, y: y.map((v, t) => v + (t >= 60 ? 4 : 0)) });
		const found = must(supF(broken));
		expect(Math.abs(found.breakIndex - 60)).toBeLessThanOrEqual(1);
		expect(found.sup.p).toBeLessThan(1e-6);
		expect(must(chow(broken, 60)).p).toBeLessThan(1e-6);
		expect(must(predictiveChow(broken, 40)).p).toBeLessThan(1e-6);
		expect(must(scoreSupF(broken, 0.15, 0)).p).toBeLessThan(1e-4);
	});

	it('widens the trim for many coefficients, and refuses when nothing is left', () => {
		expect(must(supF(fitOf(drawSample(1, 30, 5)))).widened).toBe(true);
		expect(must(supF(fitOf(drawSample(1, 90, 5)))).widened).toBe(false);
		expect(supF(fitOf(drawSample(1, 11, 5)))).toMatchObject({ refused: 'empty-trim' });
		expect(scoreSupF(fitOf(drawSample(1, 11, 5)))).toMatchObject({ refused: 'empty-trim' });
		const fit = fitOf(drawSample(1, 30, 5));
		for (const n1 of [5, 25, 12.5]) expect(chow(fit, n1)).toMatchObject({ refused: 'too-short' });
		expect(predictiveChow(fit, 25)).toMatchObject({ refused: 'too-short' });
		expect(predictiveChow(fit, 0)).toMatchObject({ refused: 'lag' });
	});

	it('the guarded p-value never rises with the statistic; the published one does', () => {
		let published = 0;
		for (const functional of ['sup', 'ave', 'exp'] as const) {
			for (const k of [1, 3, 8, 40]) {
				for (const lambda of [4, 32.1, 2000]) {
					let before = 1;
					let beforePublished = 1;
					for (let x = 0.5; x < 400; x += 0.5) {
						const p = hansenP(functional, x, k, lambda, true);
						expect(p).toBeLessThanOrEqual(before + 1e-12);
						const open = hansenP(functional, x, k, lambda, false);
						if (open > beforePublished + 1e-6) published++;
						before = p;
						beforePublished = open;
					}
				}
			}
		}
		expect(published).toBeGreaterThan(0);
	});

	it('the score form does not depend on how the regressors are combined', () => {
		const sample = drawSample(14, 70, 3);
		const [c, a, b] = sample.design.columns;
		const combined = designOf([
			{ name: 'const', column: c! },
			{ name: 'sum', column: a!.map((v, t) => v + 2 * b![t]!) },
			{ name: 'gap', column: a!.map((v, t) => 1e5 * (v - b![t]!)) }
		]);
		const one = must(scoreSupF(fitOf(sample)));
		const other = must(scoreSupF(fitOf({ y: sample.y, design: combined })));
		expect(apart(one.stat, other.stat)).toBeLessThan(1e-10);
		expect(one.breakIndex).toBe(other.breakIndex);
	});

	it('the score form of a mean is the squared cumulated residual over its variance', () => {
		const y = drawSample(15, 40, 2).y;
		const fit = fitOf({ y, design: designOf([constant(40)]) });
		const found = must(scoreSupF(fit, 0.15, 0));
		const b = 17;
		let sum = 0;
		for (let t = 0; t < b; t++) sum += fit.resid[t]!;
		const expected = (40 * sum ** 2) / (fit.rss / 40) / (b * (40 - b));
		expect(apart(found.path[b - found.from]!, expected)).toBeLessThan(1e-12);
	});
});

describe('Nyblom-Hansen', () => {
	const sample = drawSample(31, 90, 3);

	it('sees a coefficient that wanders, and names it', () => {
		const next = mulberry32(9);
		let slope = 0;
		const wandering = sample.y.map(
			(y, t) => y + (slope += 0.4 * drawNormal(next)) * sample.design.columns[2]![t]!
		);
		const found = must(nyblomHansen(fitOf({ y: wandering, design: sample.design })));
		expect(found.jointCoefficients.stat).toBeGreaterThan(found.jointCoefficients.critical![3]!);
		expect(found.individual.map((part) => part.name)).toEqual(['const', 'x1', 'x2', 'variance']);
		expect(found.individual[2]!.pBetween).toEqual([0, 0.01]);
		const quiet = must(nyblomHansen(fitOf(sample)));
		expect(quiet.jointWithVariance.pBetween).toEqual([0.1, 1]);
		expect(quiet.jointWithVariance.df).toBe(4);
	});

	it('has no table beyond 20 parameters', () => {
		const wide = must(nyblomHansen(fitOf(drawSample(32, 120, 20))));
		expect(wide.jointCoefficients.critical).toHaveLength(4);
		expect(wide.jointWithVariance).toMatchObject({
			df: 21,
			critical: null,
			pBetween: null,
			pApproximate: null
		});
	});
});

it('windowed estimates start and end where they say, and are refused outside the sample', () => {
	const fit = fitOf(drawSample(41, 50, 3));
	const whole = must(recursiveCoefficients(fit, [30, 50]))[1]!;
	expect(whole).toMatchObject({ from: 1, to: 50, coef: fit.coef, se: fit.se });
	expect(must(rollingCoefficients(fit, 20, [1, 31])).map((w) => [w.from, w.to])).toEqual([
		[1, 20],
		[31, 50]
	]);
	expect(usualWindow(50, 3)).toBe(20);
	expect(usualWindow(50, 12)).toBe(24);
	expect(rollingCoefficients(fit, 20, [32])).toMatchObject({ refused: 'lag' });
	expect(recursiveCoefficients(fit, [3])).toMatchObject({ refused: 'too-short' });
});
