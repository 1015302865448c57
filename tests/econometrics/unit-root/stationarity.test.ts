import { describe, expect, it } from 'vitest';
import { dfGls } from '$lib/econometrics/unit-root/df-gls';
import { kpss } from '$lib/econometrics/unit-root/kpss';
import { longLag, longRunVariance, shortLag } from '$lib/econometrics/unit-root/long-run-variance';
import { orderOfIntegration, type FormTests } from '$lib/econometrics/unit-root/order-of-integration';
import { phillipsPerron } from '$lib/econometrics/unit-root/phillips-perron';
import { adf } from '$lib/econometrics/unit-root/adf';
import { made, noise, randomWalk, reasonOf } from '../simulated';

describe('KPSS test', () => {
	it('does not see what it takes out', () => {
		const v = randomWalk(11, 80);
		const around = made(kpss(v, { det: 'c', lag: 3 })).stat;
		expect(
			made(
				kpss(
					v.map((x) => 5 * x - 70),
					{ det: 'c', lag: 3 }
				)
			).stat
		).toBeCloseTo(around, 10);
		const aroundTrend = made(kpss(v, { det: 'ct', lag: 3 })).stat;
		expect(
			made(
				kpss(
					v.map((x, i) => x + 3 - 0.7 * i),
					{ det: 'ct', lag: 3 }
				)
			).stat
		).toBeCloseTo(aroundTrend, 10);
	});

	it('says when a p-value lies beyond the table', () => {
		const still = made(kpss(noise(3, 200), { det: 'c', lag: 'short' }));
		expect(still.bracket).toBe('>');
		expect(still.pvalue).toBe(0.1);
		expect(still.lag).toBe(4);
		const wandering = made(kpss(randomWalk(5, 200), { det: 'c', lag: 0 }));
		expect(wandering.bracket).toBe('<');
		expect(wandering.pvalue).toBe(0.01);
	});

	it('refuses a window as long as the sample and a series that does not vary', () => {
		expect(reasonOf(kpss(noise(1, 30), { det: 'c', lag: 30 }))).toBe('lag');
		expect(reasonOf(kpss(noise(1, 30), { det: 'c', lag: 2.5 }))).toBe('lag');
		expect(reasonOf(kpss(new Float64Array(30).fill(4), { det: 'c', lag: 'long' }))).toBe('constant');
	});

	it('uses windows that grow with the fourth root of the sample', () => {
		expect([shortLag(100), longLag(100), shortLag(1600), longLag(1600)]).toEqual([4, 12, 8, 24]);
		expect(longRunVariance(Float64Array.of(1, -1, 1, -1), 1)).toBeCloseTo(1 - 2 * 0.5 * 0.75, 14);
	});
});

describe('tests beside the Dickey-Fuller test', () => {
	it('Phillips-Perron without a window is the Dickey-Fuller t-ratio', () => {
		const v = randomWalk(21, 100);
		const plain = made(adf(v, { det: 'ct', lags: 0 }));
		const corrected = made(phillipsPerron(v, { det: 'ct', lag: 0 }));
		expect(corrected.zTau).toBeCloseTo(plain.stat, 9);
		expect(corrected.rho - 1).toBeCloseTo(plain.rhoMinusOne, 10);
	});

	it('DF-GLS takes its trend values between the tabulated sizes, and says when the sample is shorter', () => {
		const at = (T: number) => made(dfGls(randomWalk(2, T), { det: 'ct', lags: 0 }));
		expect(at(100).critical['5%']).toBeCloseTo(-3.03, 12);
		expect(at(75).critical['5%']).toBeCloseTo(-3.19 + (0.16 * (1 / 50 - 1 / 75)) / 0.01, 12);
		expect(at(40).critical['5%']).toBe(-3.19);
		expect([at(40).shorterThanTable, at(50).shorterThanTable]).toEqual([true, false]);
		expect(at(100).pvalue).toBeNull();
	});
});

describe('order of integration', () => {
	const form = (unitRoot: readonly boolean[], stationarity: readonly boolean[]): FormTests => ({
		unitRoot: unitRoot.map((rejects, i) => ({
			test: i === 0 ? 'adf' : 'pp',
			stat: rejects ? -4 : -1,
			critical: -2.9
		})),
		stationarity: stationarity.map((rejects) => ({
			test: 'kpss',
			stat: rejects ? 0.9 : 0.1,
			critical: 0.463
		}))
	});
	const wanders = form([false, false], [true, true]);
	const settles = form([true, true], [false, false]);

	it.each([
		['I(1)', wanders, settles],
		['I(0)', settles, settles],
		['I(2)', wanders, wanders],
		['I(2)', wanders, form([false, true], [true])],
		['contradiction', form([true], [true]), settles],
		['contradiction', form([false], [false]), settles],
		['contradiction', form([true, false], [true]), settles],
		['contradiction', wanders, form([true], [true])],
		['contradiction', wanders, form([false], [false])],
		['contradiction', form([false], [true, false]), settles]
	] as const)('%s', (order, level, difference) => {
		expect(made(orderOfIntegration({ level, difference })).order).toBe(order);
	});

	it('cannot be read without one test of each kind', () => {
		expect(reasonOf(orderOfIntegration({ level: form([], [true]), difference: settles }))).toBe('too-short');
		expect(reasonOf(orderOfIntegration({ level: wanders, difference: form([true], []) }))).toBe('too-short');
	});
});
