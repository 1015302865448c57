import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { toErrorCorrection, toLevels } from '$lib/econometrics/error-correction/adl';
import { driverLags, ownLags } from '$lib/econometrics/error-correction/lag-coefficients';
import { withLevels } from '$lib/econometrics/error-correction/with-levels';
import { longRun } from '$lib/econometrics/error-correction/long-run';
import { oneStep } from '$lib/econometrics/error-correction/one-step';
import { twoStep } from '$lib/econometrics/error-correction/two-step';
import { termName, type Coefficients, type Term } from '$lib/econometrics/error-correction/terms';
import { leastSquares } from '$lib/econometrics/regression/least-squares';
import { designOf } from '$lib/econometrics/series/design';
import { correctingSample, equation, made } from '../simulated';

const coefficients = (entries: readonly (readonly [Term, number])[]): Coefficients => ({
	terms: entries.map(([term]) => term),
	values: Float64Array.from(entries, ([, value]) => value),
	covariance: null,
	df: 50
});

/** A full equation in error-correction form: every lag up to the largest. */
const fullEquation = fc
	.record({
		p: fc.integer({ min: 0, max: 4 }),
		q: fc.array(fc.integer({ min: 0, max: 3 }), { minLength: 1, maxLength: 3 })
	})
	.chain(({ p, q }) => {
		const drivers = q.map((last, j) => ({ series: `x.${j}`, last }));
		const terms: Term[] = [
			{ kind: 'constant' },
			{ kind: 'trend' },
			{ kind: 'own-level', lag: 1 },
			...drivers.map(({ series }): Term => ({ kind: 'driver-level', series, lag: 1 })),
			...Array.from({ length: p }, (_, i): Term => ({ kind: 'own-change', lag: i + 1 })),
			...drivers.flatMap(({ series, last }) =>
				Array.from({ length: last + 1 }, (_, lag): Term => ({ kind: 'driver-change', series, lag }))
			)
		];
		const value = fc.double({ min: -2, max: 2, noNaN: true });
		return fc
			.tuple(
				fc.array(value, { minLength: terms.length, maxLength: terms.length }),
				fc.array(value, { minLength: terms.length ** 2, maxLength: terms.length ** 2 })
			)
			.map(([values, root]): Coefficients => {
				const k = terms.length;
				const covariance = new Float64Array(k * k);
				for (let i = 0; i < k; i++)
					for (let j = 0; j < k; j++)
						for (let c = 0; c < k; c++) covariance[j * k + i]! += root[i * k + c]! * root[j * k + c]!;
				return { terms, values: Float64Array.from(values), covariance, df: 40 };
			});
	});

describe('levels form and error-correction form', () => {
	it('one lag each: y = c + d1 x(t) + d2 x(t-1) + m y(t-1) has speed 1 - m and slope (d1 + d2)/(1 - m)', () => {
		const [c, d1, d2, m] = [0.7, 0.25, 0.4, 0.6];
		const ecm = toErrorCorrection(
			coefficients([
				[{ kind: 'constant' }, c],
				[{ kind: 'own-level', lag: 1 }, m],
				[{ kind: 'driver-level', series: 'x', lag: 0 }, d1],
				[{ kind: 'driver-level', series: 'x', lag: 1 }, d2]
			])
		);
		const relation = made(longRun(ecm));
		expect(relation.lambda).toBeCloseTo(1 - m, 14);
		expect(relation.slopes[0]!.coef).toBeCloseTo((d1 + d2) / (1 - m), 13);
		expect(relation.constant!.coef).toBeCloseTo(c / (1 - m), 13);
	});

	it('there and back is the identity, for values and covariance', () => {
		fc.assert(
			fc.property(fullEquation, (ecm) => {
				const back = toErrorCorrection(toLevels(ecm));
				expect(back.terms.map(termName)).toEqual(ecm.terms.map(termName));
				back.values.forEach((value, i) => expect(Math.abs(value - ecm.values[i]!)).toBeLessThan(1e-12));
				const size = Math.max(...ecm.covariance!.map(Math.abs), 1);
				back.covariance!.forEach((value, i) =>
					expect(Math.abs(value - ecm.covariance![i]!)).toBeLessThan(1e-12 * size)
				);
			}),
			{ numRuns: 60, seed: 20260101 }
		);
	});

	it('a pruned list keeps its restrictions: missing lags are 0 on the way back', () => {
		const pruned = coefficients([
			[{ kind: 'own-level', lag: 1 }, -0.2],
			[{ kind: 'driver-level', series: 'x', lag: 1 }, 0.1],
			[{ kind: 'own-change', lag: 3 }, 0.15],
			[{ kind: 'driver-change', series: 'x', lag: 2 }, 0.3],
			[{ kind: 'driver-change', series: 'z', lag: 1 }, -0.4]
		]);
		const levels = toLevels(pruned);
		expect(Array.from(ownLags(levels))).toEqual([0.8, 0, 0.15, -0.15]);
		expect(Array.from(driverLags(levels, 'x'))).toEqual([0, 0.1, 0.3, -0.3]);
		// A driver of the short run alone has lags that sum to 0: no long-run effect.
		expect(driverLags(levels, 'z').reduce((sum, value) => sum + value, 0)).toBeCloseTo(0, 15);
		const back = toErrorCorrection(levels);
		const named = Object.fromEntries(back.terms.map((term, i) => [termName(term), back.values[i]!]));
		expect(named['d.y.l3']).toBeCloseTo(0.15, 14);
		expect([named['d.y.l1'], named['d.y.l2'], named['d.x.l1'], named['z.l1']]).toEqual(
			[0, 0, 0, 0].map(() => expect.closeTo(0, 14))
		);
	});

	it('equals a regression of the levels', () => {
		const sample = correctingSample(31, 100);
		const fit = made(oneStep(equation, sample));
		const levels = toLevels(fit.coefficients);
		const lag = (name: string, by: number) => sample.series.get(name)!.slice(2 - by, sample.T - by);
		const direct = made(
			leastSquares(
				lag('loans', 0),
				designOf([
					{ name: 'const', column: new Float64Array(98).fill(1) },
					{ name: 'y.l1', column: lag('loans', 1) },
					{ name: 'y.l2', column: lag('loans', 2) },
					{ name: 'a.l0', column: lag('a', 0) },
					{ name: 'a.l1', column: lag('a', 1) },
					{ name: 'b.l0', column: lag('b', 0) },
					{ name: 'b.l1', column: lag('b', 1) }
				])
			)
		);
		expect(levels.terms.map(termName)).toEqual(direct.names);
		levels.values.forEach((value, i) => expect(value).toBeCloseTo(direct.coef[i]!, 10));
	});

	it('a two-step equation has a levels form through its relation', () => {
		const sample = correctingSample(5, 120);
		const fit = made(twoStep(equation, sample));
		const levels = toLevels(withLevels(fit.coefficients, fit.relation!));
		const theta = made(longRun(withLevels(fit.coefficients, fit.relation!)));
		theta.slopes.forEach(({ coef }, j) => expect(coef).toBeCloseTo(fit.relation!.slopes[j]!.value, 12));
		expect(1 - ownLags(levels).reduce((sum, value) => sum + value, 0)).toBeCloseTo(fit.adjustment.lambda, 12);
	});
});
