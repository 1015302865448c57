import { describe, expect, it } from 'vitest';
import { equationDesign } from '$lib/econometrics/error-correction/design';
import { gapFrom } from '$lib/econometrics/error-correction/gap';
import type { Equation } from '$lib/econometrics/error-correction/equation';
import { oneStep } from '$lib/econometrics/error-correction/one-step';
import { imposedLongRun, twoStep } from '$lib/econometrics/error-correction/two-step';
import {
	differencesOnly,
	fixedAgainstFree,
	imposedAgainstFree,
	levelsOnly
} from '$lib/econometrics/error-correction/companions';
import { correctingSample, equation, made, randomWalk, reasonOf } from '../simulated';

const sample = correctingSample(41, 110);
const loans = sample.series.get('loans')!;

describe('design of an equation', () => {
	const pruned: Equation = {
		dependent: 'loans',
		longRun: { drivers: ['a'], constant: true, trend: true },
		shortRun: { own: [2], drivers: [{ series: 'b', lags: [0, 3] }], constant: false },
		dummies: [
			{
				name: 'freeze',
				kind: 'pulse',
				in: 'short',
				values: new Float64Array(110).map((_, i) => (i === 50 ? 1 : 0))
			},
			{
				name: 'regime',
				kind: 'step',
				in: 'both',
				values: new Float64Array(110).map((_, i) => (i >= 60 ? 1 : 0))
			}
		],
		fixed: []
	};

	it('names only the listed terms, deterministic first, and counts rows from the largest lag', () => {
		const design = made(equationDesign(pruned, sample, 'levels'));
		expect(design.design.names).toEqual([
			'const',
			'trend',
			'freeze',
			'regime',
			'y.l1',
			'a.l1',
			'regime.l1',
			'd.y.l2',
			'd.b.l0',
			'd.b.l3'
		]);
		expect([design.maxLag, design.firstPeriod, design.y.length]).toEqual([3, 5, 106]);
		const column = (name: string) => design.design.columns[design.design.names.indexOf(name)]!;
		const b = sample.series.get('b')!;
		expect(column('trend')[0]).toBe(5);
		expect(column('d.b.l3')[0]).toBe(b[1]! - b[0]!);
		expect(column('d.y.l2')[0]).toBe(loans[2]! - loans[1]!);
		expect(column('y.l1')[0]).toBe(loans[3]);
		expect(design.y[0]).toBe(loans[4]! - loans[3]!);
		expect(column('regime').indexOf(1)).toBe(60 - 4);
		expect(column('regime.l1').indexOf(1)).toBe(61 - 4);
	});

	it('around a gap holds no levels and no long-run dummy', () => {
		const design = made(equationDesign(pruned, sample, { gap: loans }));
		expect(design.design.names).toEqual(['freeze', 'regime', 'ec.l1', 'd.y.l2', 'd.b.l0', 'd.b.l3']);
	});

	it.each([
		['domain', { ...pruned, dependent: 'deposits' }],
		['lag', { ...pruned, shortRun: { ...pruned.shortRun, own: [0] } }],
		['lag', { ...pruned, shortRun: { ...pruned.shortRun, own: [109] } }],
		['lag', { ...pruned, shortRun: { ...pruned.shortRun, drivers: [{ series: 'a', lags: [-1] }] } }],
		['duplicate', { ...pruned, shortRun: { ...pruned.shortRun, own: [1, 1] } }],
		['domain', { ...pruned, fixed: [{ term: 'd.z.l0', value: 1 }] }],
		['gap', { ...pruned, dummies: [{ ...pruned.dummies[0]!, values: new Float64Array(3) }] }]
	] as const)('refuses %s', (reason, wrong) => {
		expect(reasonOf(equationDesign(wrong, sample, 'levels'))).toBe(reason);
	});

	it('refuses a driver called y beside the dependent variable, and a value that is not finite', () => {
		const named = { ...sample, series: new Map([...sample.series, ['y', randomWalk(1, 110)]]) };
		const withY = { ...equation, longRun: { ...equation.longRun, drivers: ['y'] } };
		expect(reasonOf(oneStep(withY, named))).toBe('duplicate');
		const broken = {
			...sample,
			series: new Map([...sample.series, ['a', randomWalk(1, 110).fill(NaN, 7, 8)]])
		};
		expect(reasonOf(oneStep(equation, broken))).toBe('non-finite');
	});

	it('refuses more terms than rows, and one driver twice', () => {
		const short = { T: 8, series: new Map([...sample.series].map(([name, v]) => [name, v.slice(0, 8)])) };
		expect(reasonOf(oneStep(equation, short))).toBe('too-short');
		const doubled = {
			...sample,
			series: new Map([...sample.series, ['b', sample.series.get('a')!.map((v) => 2 * v)]])
		};
		expect(reasonOf(oneStep(equation, doubled))).toBe('rank');
	});
});

describe('estimators', () => {
	it('fixing a coefficient at its free estimate changes no other', () => {
		const free = made(oneStep(equation, sample));
		const at = (name: string) => free.fit.names.indexOf(name);
		const value = free.fit.coef[at('d.a.l0')]!;
		const fixed = made(oneStep({ ...equation, fixed: [{ term: 'd.a.l0', value }] }, sample));
		fixed.fit.names.forEach((name, j) => expect(fixed.fit.coef[j]).toBeCloseTo(free.fit.coef[at(name)]!, 10));
		expect(fixed.fit.rss).toBeCloseTo(free.fit.rss, 9);
		expect(fixed.fit.k).toBe(free.fit.k - 1);
		const fixedTerm = fixed.coefficients.terms.length - 1;
		expect(fixed.coefficients.values[fixedTerm]).toBe(value);
		expect(fixed.coefficients.covariance![fixedTerm * (fixedTerm + 1) + fixedTerm]).toBe(0);
		expect(made(fixedAgainstFree(fixed, sample))).toMatchObject({ df1: 1, F: expect.closeTo(0, 8) });
	});

	it('the F of a fixed coefficient is the square of its t-ratio against that value', () => {
		const free = made(oneStep(equation, sample));
		const j = free.fit.names.indexOf('d.a.l0');
		const fixed = made(oneStep({ ...equation, fixed: [{ term: 'd.a.l0', value: 0.9 }] }, sample));
		const t = (free.fit.coef[j]! - 0.9) / free.fit.se[j]!;
		expect(made(fixedAgainstFree(fixed, sample)).F).toBeCloseTo(t * t, 8);
	});

	it('a speed fixed by hand has no t-ratio and still a long run', () => {
		const fixed = made(oneStep({ ...equation, fixed: [{ term: 'y.l1', value: -0.25 }] }, sample));
		expect(fixed.adjustment).toEqual({ lambda: 0.25, se: 0, t: null });
		expect(fixed.relation!.slopes[0]!.value).toBeGreaterThan(0.5);
	});

	it('imposing the relation that the first step estimated gives the two-step equation', () => {
		const two = made(twoStep(equation, sample));
		const imposed = made(imposedLongRun(equation, sample, two.relation!));
		imposed.fit.coef.forEach((value, j) => expect(value).toBeCloseTo(two.fit.coef[j]!, 9));
		expect(made(imposedAgainstFree(imposed, sample)).df1).toBe(2);
		expect(
			reasonOf(imposedLongRun(equation, sample, { ...two.relation!, slopes: [{ series: 'z', value: 1 }] }))
		).toBe('domain');
	});

	it('refuses an imposed relation with a dummy that the equation does not have', () => {
		const relation = { constant: 0, trend: 0, slopes: [], dummies: [{ name: 'regime', value: 1 }] };
		expect(reasonOf(imposedLongRun(equation, sample, relation))).toBe('domain');
	});

	it('a long-run dummy is part of the gap', () => {
		const step = new Float64Array(110).map((_, i) => (i >= 55 ? 1 : 0));
		const shifted = {
			T: 110,
			series: new Map([...sample.series, ['loans', loans.map((v, i) => v + 5 * step[i]!)]])
		};
		const withStep: Equation = {
			...equation,
			dummies: [{ name: 'regime', kind: 'step', in: 'long', values: step }]
		};
		const fit = made(twoStep(withStep, shifted));
		expect(fit.relation!.dummies[0]!.value).toBeGreaterThan(4);
		expect(fit.gap).toEqual(fit.static!.resid);
		gapFrom(fit.relation!, withStep, shifted).forEach((value, i) =>
			expect(value).toBeCloseTo(fit.gap![i]!, 9)
		);
	});

	it('takes another covariance of the coefficients where one is given', () => {
		const plain = made(oneStep(equation, sample));
		const wide = made(oneStep(equation, sample, (fit) => fit.vcov.map((v) => 4 * v)));
		expect(wide.adjustment.se).toBeCloseTo(2 * plain.adjustment.se, 12);
		expect(wide.adjustment.lambda).toBe(plain.adjustment.lambda);
	});
});

describe('cheaper companions', () => {
	it('differences only leave out the levels on the same rows', () => {
		const companion = made(differencesOnly(equation, sample));
		const full = made(oneStep(equation, sample));
		expect(companion.fit.names).toEqual(['const', 'd.y.l1', 'd.a.l0', 'd.b.l0']);
		expect(companion.fit.nobs).toBe(full.fit.nobs);
		const { F, df1, df2 } = companion.longRunF!;
		expect([df1, df2]).toEqual([3, full.fit.nobs - full.fit.k]);
		expect(F).toBeCloseTo((companion.fit.rss - full.fit.rss) / 3 / (full.fit.rss / df2), 9);
	});

	it('levels that cointegrate are told from levels that only wander together', () => {
		const lags = { rule: 'AIC', maxLag: 4 } as const;
		expect(made(levelsOnly(equation, sample, lags)).reading).toBe('levels cointegrate');
		const single: Equation = { ...equation, longRun: { drivers: ['a'], constant: true, trend: false } };
		const readings = Array.from({ length: 60 }, (_, i) => {
			const series = new Map([
				['loans', randomWalk(50000 + 2 * i, 120)],
				['a', randomWalk(50001 + 2 * i, 120)]
			]);
			return made(levelsOnly(single, { T: 120, series }, lags));
		});
		const wander = readings.filter((r) => r.reading === 'levels wander together without cointegrating');
		expect(wander.length).toBeGreaterThanOrEqual(53);
		// Independent random walks: the old sign shows again and again although there is no relation.
		expect(wander.filter((r) => r.rSquaredAboveDurbinWatson).length).toBeGreaterThan(30);
	});

	it('says so when no table judges the levels', () => {
		const bare = { ...equation, longRun: { ...equation.longRun, constant: false } };
		expect(made(levelsOnly(bare, sample, 1)).reading).toBe('not established');
	});
});
