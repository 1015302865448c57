import { describe, expect, it } from 'vitest';
import { cumulativeMultipliers } from '$lib/econometrics/error-correction/multipliers';
import type { Equation, Sample } from '$lib/econometrics/error-correction/equation';
import { oneStep } from '$lib/econometrics/error-correction/one-step';
import { projection } from '$lib/econometrics/error-correction/projection';
import { toLevels } from '$lib/econometrics/error-correction/adl';
import { twoStep } from '$lib/econometrics/error-correction/two-step';
import { withLevels } from '$lib/econometrics/error-correction/with-levels';
import { correctingSample, equation, made, reasonOf } from '../simulated';

const whole = correctingSample(77, 132);
const cut = (from: number, to: number) =>
	new Map([...whole.series].map(([name, v]) => [name, v.slice(from, to)]));
const sample: Sample = { T: 120, series: cut(0, 120) };
const drivers = cut(120, 132);
const noDummies = new Map<string, Float64Array>();

const richer: Equation = {
	...equation,
	longRun: { ...equation.longRun, trend: true },
	dummies: [
		{ name: 'regime', kind: 'step', in: 'long', values: new Float64Array(120).fill(1, 70) },
		{ name: 'shock', kind: 'pulse', in: 'short', values: new Float64Array(120).fill(1, 30, 31) }
	]
};
const future = { horizon: 12, drivers, dummies: new Map([['regime', new Float64Array(12).fill(1)]]) };

describe('projection', () => {
	it('first step is the fitted equation by hand', () => {
		const fit = made(oneStep(equation, sample));
		const path = made(
			projection(fit.coefficients, equation, sample, { horizon: 12, drivers, dummies: noDummies })
		);
		const b = Object.fromEntries(fit.fit.names.map((name, j) => [name, fit.fit.coef[j]!]));
		const at = (name: string, t: number) => whole.series.get(name)![t]!;
		const change =
			b.const! +
			b['y.l1']! * at('loans', 119) +
			b['a.l1']! * at('a', 119) +
			b['b.l1']! * at('b', 119) +
			b['d.y.l1']! * (at('loans', 119) - at('loans', 118)) +
			b['d.a.l0']! * (at('a', 120) - at('a', 119)) +
			b['d.b.l0']! * (at('b', 120) - at('b', 119));
		expect(path[0]).toBeCloseTo(at('loans', 119) + change, 10);
	});

	it('of an equation around a gap goes through the multiplied-out levels, trend and step included', () => {
		const fit = made(twoStep(richer, sample));
		const path = made(projection(withLevels(fit.coefficients, fit.relation!), richer, sample, future));
		// Step by step around the gap.
		const { relation, coefficients } = fit;
		const value = (name: string) => fit.fit.coef[fit.fit.names.indexOf(name)]!;
		const y = Array.from(sample.series.get('loans')!);
		const at = (name: string, t: number) => whole.series.get(name)![t]!;
		const gap = (t: number) =>
			y[t]! -
			relation!.constant -
			relation!.trend * (t + 1) -
			relation!.slopes.reduce((sum, s) => sum + s.value * at(s.series, t), 0) -
			relation!.dummies[0]!.value;
		for (let t = 120; t < 132; t++)
			y.push(
				y[t - 1]! +
					value('const') +
					value('ec.l1') * gap(t - 1) +
					value('d.y.l1') * (y[t - 1]! - y[t - 2]!) +
					value('d.a.l0') * (at('a', t) - at('a', t - 1)) +
					value('d.b.l0') * (at('b', t) - at('b', t - 1))
			);
		path.forEach((v, h) => expect(v).toBeCloseTo(y[120 + h]!, 8));
		expect(coefficients.terms.length).toBe(fit.fit.k);
	});

	it('moves with a step of a driver as the multipliers say', () => {
		const fit = made(oneStep(equation, sample));
		const base = { horizon: 12, drivers, dummies: noDummies };
		const lifted = { ...base, drivers: new Map([...drivers, ['a', drivers.get('a')!.map((v) => v + 1)]]) };
		const low = made(projection(fit.coefficients, equation, sample, base));
		const high = made(projection(fit.coefficients, equation, sample, lifted));
		const multipliers = cumulativeMultipliers(toLevels(fit.coefficients), 'a', 11);
		high.forEach((value, h) => expect(value - low[h]!).toBeCloseTo(multipliers[h]!, 9));
	});

	it('refuses a driver without a path, or with one of another length', () => {
		const fit = made(oneStep(equation, sample));
		const without = new Map([['a', drivers.get('a')!]]);
		expect(reasonOf(projection(fit.coefficients, equation, sample, { ...future, drivers: without }))).toBe(
			'no-scenario'
		);
		expect(reasonOf(projection(fit.coefficients, equation, sample, { ...future, horizon: 8 }))).toBe(
			'no-scenario'
		);
	});
});
