import { describe, expect, it } from 'vitest';
import { bootstrapEcm } from '$lib/econometrics/cointegration/bootstrap-ecm';
import { bootstrapEngleGranger, sieveOrder } from '$lib/econometrics/cointegration/bootstrap-engle-granger';
import { boundsOfF, boundsTest, readFBounds } from '$lib/econometrics/cointegration/bounds';
import { ecmT, ecmTCritical, readTBounds, tBounds } from '$lib/econometrics/cointegration/ecm-t';
import { dynamicOls } from '$lib/econometrics/cointegration/dynamic-ols';
import { engleGranger } from '$lib/econometrics/cointegration/engle-granger';
import { engleGrangerPath } from '$lib/econometrics/cointegration/engle-granger-path';
import { quantile } from '$lib/econometrics/cointegration/quantile';
import { residualStationarity } from '$lib/econometrics/cointegration/residual-stationarity';
import { shin } from '$lib/econometrics/cointegration/shin';
import { oneStep } from '$lib/econometrics/error-correction/one-step';
import { leastSquares } from '$lib/econometrics/regression/least-squares';
import { designOf } from '$lib/econometrics/series/design';
import { drawNormal, mulberry32 } from '$lib/econometrics/random/mulberry32';
import { adf } from '$lib/econometrics/unit-root/adf';
import { mackinnonCritical } from '$lib/econometrics/unit-root/mackinnon';
import { correctingSample, cumulated, equation, made, noise, randomWalk, reasonOf } from '../simulated';

const sample = correctingSample(61, 100);
const column = (name: string) => ({ name, column: sample.series.get(name)! });
const model = { y: sample.series.get('loans')!, det: 'c' as const, drivers: [column('a'), column('b')] };

describe('Engle-Granger test', () => {
	it('is judged by the table of as many variables as the relation has, not by that of one series', () => {
		const test = made(engleGranger(model, 1));
		expect(test.variables).toBe(3);
		expect(test.critical).toEqual(mackinnonCritical('c', 3, 99));
		const single = made(adf(test.gap, { det: 'n', lags: 1 }));
		expect(test.stat).toBeCloseTo(single.stat, 12);
		expect(test.critical!['5%']).toBeLessThan(single.critical['5%'] - 1);
	});

	it('has no table with a step in the relation or without a constant; a pulse leaves it', () => {
		const dummy = (kind: 'pulse' | 'step') => ({
			name: 'd',
			kind,
			column: new Float64Array(100).map((_, i) => (kind === 'step' ? (i > 50 ? 1 : 0) : i === 50 ? 1 : 0))
		});
		expect(made(engleGranger({ ...model, dummies: [dummy('step')] }, 1))).toMatchObject({
			critical: null,
			pvalue: null
		});
		expect(made(engleGranger({ ...model, dummies: [dummy('pulse')] }, 1)).critical).not.toBeNull();
		expect(made(engleGranger({ ...model, det: 'n' }, 1)).critical).toBeNull();
		expect(reasonOf(engleGranger({ ...model, drivers: [] }, 1))).toBe('too-short');
	});

	it('rejects about as often as it should when there is no relation', () => {
		let rejections = 0;
		for (let i = 0; i < 400; i++) {
			const y = randomWalk(5000 + 3 * i, 80);
			const x = { name: 'x', column: randomWalk(5001 + 3 * i, 80) };
			const test = made(engleGranger({ y, det: 'c', drivers: [x] }, 1));
			if (test.stat < test.critical!['5%']) rejections++;
		}
		expect(rejections).toBeGreaterThan(8);
		expect(rejections).toBeLessThan(36);
	});
});

describe('Engle-Granger path', () => {
	it('ends at the test of the whole sample and uses the value of each own length', () => {
		const path = engleGrangerPath(model, 1, 40);
		const whole = made(engleGranger(model, 1));
		expect(path.length).toBe(61);
		expect(path.at(-1)).toEqual({ end: 100, stat: whole.stat, critical: whole.critical!['5%'] });
		expect(path[0]!.critical).toBe(mackinnonCritical('c', 3, 39)!['5%']);
	});

	it('leaves a dummy out until it is switched on', () => {
		const pulse = { name: 'p', kind: 'pulse', column: new Float64Array(100).fill(1, 80, 81) } as const;
		expect(engleGrangerPath({ ...model, dummies: [pulse] }, 1, 40).length).toBe(61);
	});
});

describe('tests with cointegration as the null', () => {
	it('finds the long run through leads and lags, with errors', () => {
		const relation = made(dynamicOls(model, { leads: 2, lag: 4 }));
		const [, a, b] = relation.coefficients;
		expect(Math.abs(a!.coef - 0.8)).toBeLessThan(3 * a!.se);
		expect(Math.abs(b!.coef + 0.3)).toBeLessThan(3 * b!.se);
		expect(relation.fit.nobs).toBe(100 - 1 - 4);
	});

	it("Shin's test rejects a relation about as rarely as it should, and its absence mostly", () => {
		const rejections = (seed: number, errors: (seed: number) => Float64Array) => {
			let count = 0;
			for (let i = 0; i < 200; i++) {
				const x = randomWalk(seed + 2 * i, 120);
				const y = errors(seed + 2 * i + 1).map((e, t) => 1 + 0.8 * x[t]! + e);
				const test = made(shin({ y, det: 'c', drivers: [{ name: 'x', column: x }] }, { leads: 1, lag: 4 }));
				if (test.stat > test.critical!['5%']) count++;
			}
			return count;
		};
		const kept = rejections(30_000, (seed) => noise(seed, 120));
		expect(kept).toBeGreaterThan(2);
		expect(kept).toBeLessThan(22);
		expect(rejections(40_000, (seed) => randomWalk(seed, 120))).toBeGreaterThan(120);
	});

	it('has no table with a step or six drivers, and refuses windows that do not fit', () => {
		const six = {
			...model,
			drivers: [1, 2, 3, 4, 5, 6].map((i) => ({ name: `x${i}`, column: randomWalk(i, 100) }))
		};
		expect(made(shin(six, { leads: 1, lag: 4 })).critical).toBeNull();
		expect(reasonOf(shin(model, { leads: 1, lag: 200 }))).toBe('lag');
		expect(reasonOf(shin(model, { leads: -1, lag: 4 }))).toBe('lag');
		expect(reasonOf(shin(model, { leads: 50, lag: 4 }))).toBe('too-short');
	});
});

describe('stationarity of the gap', () => {
	const gap = noise(9, 60);
	it('picks the table from where the coefficients come from', () => {
		const here = made(
			residualStationarity(gap, { coefficients: 'estimated-here', det: 'ct', drivers: 2, step: false }, 1)
		);
		expect(here.critical).toEqual(mackinnonCritical('ct', 3, 59));
		expect(here.regressionDet).toBe('n');
		const later = made(residualStationarity(gap, { coefficients: 'held', overlap: false, drivers: 2 }, 1));
		expect(later.critical).toEqual(mackinnonCritical('c', 1, 58));
		expect(later.criticalSingle).toBeNull();
		expect(later.stat).toBeCloseTo(made(adf(gap, { det: 'c', lags: 1 })).stat, 12);
		expect(later.withoutConstant!.stat).toBeCloseTo(made(adf(gap, { det: 'n', lags: 1 })).stat, 12);
		const overlapping = made(
			residualStationarity(gap, { coefficients: 'held', overlap: true, drivers: 2 }, 1)
		);
		expect(overlapping.critical).toEqual(mackinnonCritical('c', 3, 59));
		expect(overlapping.criticalSingle).toEqual(mackinnonCritical('c', 1, 58));
	});

	it('has no table for a relation with a step or without a constant', () => {
		const step = { coefficients: 'estimated-here', det: 'c', drivers: 1, step: true } as const;
		expect(made(residualStationarity(gap, step, 0)).critical).toBeNull();
		expect(made(residualStationarity(gap, { ...step, step: false, det: 'n' }, 0)).critical).toBeNull();
		expect(reasonOf(residualStationarity(gap, { ...step, drivers: 0 }, 0))).toBe('too-short');
	});
});

describe('t-test of the speed', () => {
	it('has finite-sample values that tend to the I(1) bound', () => {
		for (const det of ['c', 'ct'] as const)
			for (let drivers = 1; drivers <= 8; drivers++)
				for (const level of ['1%', '5%', '10%'] as const)
					expect(
						Math.abs(ecmTCritical(det, drivers, 1e9)![level] - tBounds(det, drivers)![level][1])
					).toBeLessThan(0.045);
	});

	it('has values that a simulation finds again: one driver, 60 rows, constant', () => {
		const uniform = mulberry32(20260103);
		const walk = () => cumulated(Float64Array.from({ length: 61 }, () => drawNormal(uniform)));
		const ones = new Float64Array(60).fill(1);
		const stats = Float64Array.from({ length: 12_000 }, () => {
			const [y, x] = [walk(), walk()];
			const change = (v: Float64Array) => v.slice(1).map((value, i) => value - v[i]!);
			const fit = made(
				leastSquares(
					change(y),
					designOf([
						{ name: 'const', column: ones },
						{ name: 'x.l1', column: x.slice(0, 60) },
						{ name: 'd.x', column: change(x) },
						{ name: 'y.l1', column: y.slice(0, 60) }
					])
				)
			);
			return fit.coef[3]! / (Math.abs(fit.inverseFactor[15]!) * Math.sqrt(fit.rss / 56));
		});
		const table = ecmTCritical('c', 1, 60)!;
		expect(Math.abs(quantile(stats, 0.05) - table['5%'])).toBeLessThan(0.05);
		expect(Math.abs(quantile(stats, 0.1) - table['10%'])).toBeLessThan(0.05);
		expect(Math.abs(quantile(stats, 0.01) - table['1%'])).toBeLessThan(0.12);
	});

	it('has no surface below 30 rows or above 8 drivers, and reads the bounds between', () => {
		const equationOf = (drivers: number, nobs: number, extraTerms = 0) =>
			made(ecmT(-3, { det: 'c', drivers, nobs, extraTerms }));
		expect(equationOf(1, 29).critical).toBeNull();
		expect(equationOf(1, 33, 4).critical).toBeNull();
		expect(equationOf(9, 100)).toMatchObject({ critical: null, bounds: { '5%': [-2.86, -4.88] } });
		expect(equationOf(11, 100).bounds).toBeNull();
		expect(readTBounds(-3.4, [-2.86, -3.22])).toBe('rejected');
		expect(readTBounds(-3, [-2.86, -3.22])).toBe('inconclusive');
		expect(readTBounds(-2, [-2.86, -3.22])).toBe('not rejected');
	});
});

describe('bounds test', () => {
	it('has the published bounds', () => {
		expect(boundsOfF(3, 1, 200)).toMatchObject({ observations: null, levels: { '5%': [4.94, 5.73] } });
		expect(boundsOfF(3, 1, 34)).toMatchObject({ observations: 30, levels: { '5%': [5.395, 6.35] } });
		expect(boundsOfF(1, 2, 40)).toMatchObject({ source: 'Pesaran, Shin & Smith 2001' });
		expect(boundsOfF(3, 2, 29)).toBeNull();
		expect(boundsOfF(3, 11, 100)).toBeNull();
		// The 80-row block of case 4 is not to be had.
		expect(boundsOfF(4, 1, 80)).toMatchObject({ observations: 75, levels: { '5%': [4.937, 5.443] } });
	});

	it('falls with the number of observations at every level, so that the row below is the careful one', () => {
		for (const boundsCase of [2, 3, 4, 5] as const)
			for (let drivers = 1; drivers <= 6; drivers++)
				for (const level of ['5%', '1%'] as const) {
					const upper = [30, 50, 75].map((n) => boundsOfF(boundsCase, drivers, n)!.levels[level]![1]);
					expect(upper[0]).toBeGreaterThan(upper[1]!);
					expect(upper[1]).toBeGreaterThan(upper[2]!);
				}
	});

	it('reads a statistic between the bounds as inconclusive', () => {
		expect(readFBounds(6, [4.94, 5.73])).toBe('rejected');
		expect(readFBounds(5, [4.94, 5.73])).toBe('inconclusive');
		expect(readFBounds(4, [4.94, 5.73])).toBe('not rejected');
	});

	it('has p-values that fit its bounds', () => {
		const test = made(boundsTest(equation, sample, 3));
		expect(test.FP!.I0).toBeLessThanOrEqual(test.FP!.I1);
		expect(test.t).toBeCloseTo(made(oneStep(equation, sample)).adjustment.t!, 12);
	});
});

describe('bootstraps', () => {
	const options = { replications: 199, seed: 7 };

	it('of the equation start from the statistics of the tables', () => {
		const test = made(bootstrapEcm(equation, sample, options));
		expect(test.t.stat).toBeCloseTo(made(oneStep(equation, sample)).adjustment.t!, 9);
		expect(test.F.stat).toBeCloseTo(made(boundsTest(equation, sample, 3)).F, 8);
		expect(test.t.pvalue).toBe(1 / 200);
		expect(made(bootstrapEcm(equation, sample, options))).toEqual(test);
		expect(test.draws).toBe(199 * 98);
	});

	it('of the equation have critical values near the surface in the case it is made for', () => {
		const walks = {
			T: 81,
			series: new Map([
				['loans', randomWalk(70, 81)],
				['a', randomWalk(71, 81)]
			])
		};
		const plain = {
			...equation,
			longRun: { drivers: ['a'], constant: true, trend: false },
			shortRun: { own: [], drivers: [{ series: 'a', lags: [0] }], constant: true }
		};
		const test = made(bootstrapEcm(plain, walks, { replications: 1999, seed: 3 }));
		expect(Math.abs(test.t.critical['5%'] - ecmTCritical('c', 1, 80)!['5%'])).toBeLessThan(0.5);
		expect(test.t.pvalue).toBeGreaterThan(0.05);
	});

	it('of the equation take a step of the long run and refuse fixed coefficients', () => {
		const step = new Float64Array(100).map((_, i) => (i > 40 ? 1 : 0));
		const withStep = {
			...equation,
			dummies: [{ name: 'd', kind: 'step', in: 'long', values: step } as const]
		};
		expect(made(bootstrapEcm(withStep, sample, options)).F.pvalue).toBeLessThan(0.05);
		const fixed = { ...equation, fixed: [{ term: 'd.a.l0', value: 0.4 }] };
		expect(reasonOf(bootstrapEcm(fixed, sample, options))).toBe('given');
		expect(reasonOf(bootstrapEcm(equation, sample, { replications: 0, seed: 1 }))).toBe('domain');
	});

	it('of the residual test repeat themselves and find the relation', () => {
		const all = { ...options, lags: 1, scheme: 'iid' } as const;
		const test = made(bootstrapEngleGranger(model, all));
		expect(test.pvalue).toBeLessThan(0.05);
		expect(test.pvalue).toBe((1 + test.atMost) / 200);
		expect(made(bootstrapEngleGranger(model, all)).statistics).toEqual(test.statistics);
		expect(made(bootstrapEngleGranger(model, { ...all, seed: 8 })).statistics).not.toEqual(test.statistics);
		expect(reasonOf(bootstrapEngleGranger(model, { ...all, replications: 1.5 }))).toBe('domain');
	});

	it('choose a sieve order that follows the memory of the changes', () => {
		const shocks = noise(4, 401);
		const persistent = shocks.slice();
		for (let t = 1; t < 401; t++) persistent[t] = 0.7 * persistent[t - 1]! + shocks[t]!;
		expect(made(sieveOrder(cumulated(persistent)))).toBe(1);
		expect(made(sieveOrder(cumulated(shocks)))).toBe(0);
	});
});

describe('quantile', () => {
	it('interpolates linearly between order statistics', () => {
		expect(quantile(Float64Array.of(4, 1, 3, 2), 0.5)).toBe(2.5);
		expect(quantile(Float64Array.of(4, 1, 3, 2), 0.1)).toBeCloseTo(1.3, 14);
		expect(quantile(Float64Array.of(4, 1), 1)).toBe(4);
	});
});
