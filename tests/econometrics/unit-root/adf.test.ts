import { describe, expect, it } from 'vitest';
import { ols } from '$lib/econometrics/regression/ols';
import { designOf } from '$lib/econometrics/series/design';
import { adf } from '$lib/econometrics/unit-root/adf';
import { adfAuto, defaultMaxLag } from '$lib/econometrics/unit-root/adf-auto';
import { kpss } from '$lib/econometrics/unit-root/kpss';
import { mackinnonCritical, mackinnonP } from '$lib/econometrics/unit-root/mackinnon';
import { made, noise, randomWalk, reasonOf } from '../simulated';

/** The regression of dv(i) on a constant, v(i) and lags, as anybody would write it, rows from `from` on. */
function plainRegression(v: Float64Array, lags: number, from: number) {
	const rows = Array.from({ length: v.length - 1 - from }, (_, r) => from + r);
	const z = (i: number) => v[i + 1]! - v[i]!;
	const column = (value: (i: number) => number) => Float64Array.from(rows, value);
	return made(
		ols(
			column(z),
			designOf([
				{ name: 'const', column: column(() => 1) },
				{ name: 'level', column: column((i) => v[i]!) },
				...Array.from({ length: lags }, (_, l) => ({ name: `lag ${l}`, column: column((i) => z(i - l - 1)) }))
			])
		)
	);
}

describe('Dickey-Fuller test', () => {
	it('keeps its statistic whatever the unit and the base of the series', () => {
		const v = randomWalk(7, 90);
		const plain = made(adf(v, { det: 'c', lags: 2 }));
		for (const scale of [1e-8, 1e8]) {
			const other = made(
				adf(
					v.map((x) => scale * (x + 40)),
					{ det: 'c', lags: 2 }
				)
			);
			expect(other.stat).toBeCloseTo(plain.stat, 9);
		}
	});

	it('holds at the ends of the range of units, and refuses beyond', () => {
		const v = randomWalk(7, 90);
		const plain = made(adf(v, { det: 'ct', lags: 1 }));
		for (const scale of [1e-149, 1e148]) {
			const far = v.map((x) => scale * x);
			expect(made(adf(far, { det: 'ct', lags: 1 })).stat).toBeCloseTo(plain.stat, 9);
			expect(made(kpss(far, { det: 'c', lag: 'long' })).stat).toBeCloseTo(
				made(kpss(v, { det: 'c', lag: 'long' })).stat,
				10
			);
			const search = made(adfAuto(far, { det: 'c', rule: 'AIC', maxLag: 5 })).search;
			const here = made(adfAuto(v, { det: 'c', rule: 'AIC', maxLag: 5 })).search;
			expect(search.selected).toBe(here.selected);
			expect(search.criteria![2]! - here.criteria![2]!).toBeCloseTo(2 * 84 * Math.log(scale), 6);
		}
		expect(
			reasonOf(
				adf(
					v.map((x) => 1e160 * x),
					{ det: 'c', lags: 0 }
				)
			)
		).toBe('domain');
		expect(
			reasonOf(
				adf(
					v.map((x) => 1e-160 * x),
					{ det: 'c', lags: 0 }
				)
			)
		).toBe('domain');
	});

	it('chooses the lag that separate regressions on the common sample choose', () => {
		for (const seed of [1, 2, 3, 4]) {
			const shocks = noise(seed, 120);
			const v = randomWalk(seed, 120).map((x, i) => x + 0.9 * (shocks[i - 3] ?? 0));
			const search = made(adfAuto(v, { det: 'c', rule: 'AIC', maxLag: 6 })).search;
			const criteria = Array.from({ length: 7 }, (_, p) => plainRegression(v, p, 6).aic);
			expect(search.selected).toBe(criteria.indexOf(Math.min(...criteria)));
			search.criteria!.forEach((value, p) => expect(value).toBeCloseTo(criteria[p]!, 8));
			const tsig = made(adfAuto(v, { det: 'c', rule: 'tsig', maxLag: 6 })).search;
			const significant = [6, 5, 4, 3, 2, 1].find(
				(p) => Math.abs(plainRegression(v, p, 6).t[p + 1]!) >= 1.6448536
			);
			expect(tsig.selected).toBe(significant ?? 0);
			const test = made(adfAuto(v, { det: 'c', rule: 'AIC', maxLag: 6 }));
			expect(test.stat).toBeCloseTo(plainRegression(v, search.selected, search.selected).t[1]!, 9);
		}
	});

	it('refuses what it cannot test', () => {
		const v = randomWalk(3, 40);
		expect(
			reasonOf(
				adf(
					v.map((x, i) => (i === 5 ? NaN : x)),
					{ det: 'c', lags: 0 }
				)
			)
		).toBe('non-finite');
		expect(reasonOf(adf(new Float64Array(40).fill(2), { det: 'c', lags: 0 }))).toBe('constant');
		expect(reasonOf(adf(v, { det: 'c', lags: -1 }))).toBe('lag');
		expect(reasonOf(adf(v, { det: 'c', lags: 1.5 }))).toBe('lag');
		expect(reasonOf(adf(v, { det: 'c', lags: 39 }))).toBe('lag');
		expect(reasonOf(adf(v, { det: 'c', lags: 25 }))).toBe('too-short');
		expect(
			reasonOf(
				adf(
					v.map((_, i) => i),
					{ det: 'c', lags: 0 }
				)
			)
		).not.toBe('made');
		expect(reasonOf(adfAuto(v, { det: 'c', rule: 'BIC', maxLag: 40 }))).toBe('lag');
	});

	it('bounds the search by sample, rule and policy', () => {
		expect(defaultMaxLag(100, 99)).toBe(12);
		expect(defaultMaxLag(200, 8)).toBe(8);
		expect(defaultMaxLag(30, 12)).toBe(8);
		expect(defaultMaxLag(5, 8)).toBe(0);
	});
});

describe("MacKinnon's surfaces", () => {
	it('give the asymptotic values of the 2010 paper', () => {
		const far = 1e9;
		expect(mackinnonCritical('c', 1, far)!['5%']).toBeCloseTo(-2.86154, 5);
		expect(mackinnonCritical('ct', 1, far)!['1%']).toBeCloseTo(-3.95877, 5);
		expect(mackinnonCritical('c', 2, far)!['5%']).toBeCloseTo(-3.33613, 5);
		expect(mackinnonCritical('ctt', 12, far)!['10%']).toBeCloseTo(-6.22941, 4);
	});

	it('agree with each other: the p-value at an asymptotic critical value is its level', () => {
		for (const det of ['c', 'ct', 'ctt'] as const)
			for (let variables = 1; variables <= 6; variables++) {
				const critical = mackinnonCritical(det, variables, 1e9)!;
				expect(mackinnonP(critical['1%'], det, variables)!).toBeCloseTo(0.01, 2);
				expect(Math.abs(mackinnonP(critical['5%'], det, variables)! - 0.05)).toBeLessThan(0.003);
				expect(Math.abs(mackinnonP(critical['10%'], det, variables)! - 0.1)).toBeLessThan(0.005);
			}
	});

	it('end where the paper ends', () => {
		expect(mackinnonP(3, 'c', 1)).toBe(1);
		expect(mackinnonP(-40, 'c', 1)).toBe(0);
		expect(mackinnonP(50, 'n', 1)).toBeCloseTo(1, 12);
		expect(mackinnonP(-3, 'c', 7)).toBeNull();
		expect(mackinnonCritical('c', 13, 100)).toBeNull();
		expect(mackinnonCritical('n', 2, 100)).toBeNull();
	});
});
