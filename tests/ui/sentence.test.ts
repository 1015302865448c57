import { describe, expect, it } from 'vitest';
import { NO_BREAK } from '$lib/ui/format';
import { adjustmentSentence, gapSentence, longRunSentence, type Measure } from '$lib/ui/sentence';

const plain = (text: string): string => text.replaceAll(NO_BREAK, ' ');
const unemployment: Measure = { name: 'unemployment', kind: 'points' };
const losses: Measure = { name: 'losses', kind: 'points' };
const income: Measure = { name: 'income', kind: 'log' };
const consumption: Measure = { name: 'consumption', kind: 'log' };

describe('speed of adjustment', () => {
	it('names share, period and half-life', () => {
		expect(plain(adjustmentSentence({ speed: 0.3271, halfLife: 2.2041, frequency: 'quarterly' }))).toBe(
			'Speed of adjustment: 32.7 % of the equilibrium error (gap) in a quarter; half-life of a shock 2.20 quarters.'
		);
	});

	it('says that a gap is overshot', () => {
		expect(plain(adjustmentSentence({ speed: 1.25, halfLife: 0.5, frequency: 'annual' }))).toBe(
			'Speed of adjustment: 125 % of the equilibrium error (gap) in a year, so it is overshot; half-life of a shock 0.500 years.'
		);
	});

	it('claims no half-life where nothing is corrected or no shock dies out', () => {
		expect(adjustmentSentence({ speed: -0.012, halfLife: null, frequency: 'monthly' })).toBe(
			'The coefficient on the equilibrium error (gap) is +0.0120, so the gap is not closed and there is no half-life.'
		);
		expect(adjustmentSentence({ speed: 2.1, halfLife: null, frequency: 'monthly' })).toContain(
			'no half-life: a shock does not die out'
		);
	});
});

describe('long run', () => {
	it('reads points on points', () => {
		expect(longRunSentence(unemployment, losses, 0.5)).toBe(
			'One percentage point more unemployment is associated with 0.500 percentage point more losses in the long run.'
		);
	});

	it('reads log on log as an elasticity', () => {
		expect(plain(longRunSentence(income, consumption, -0.9512))).toBe(
			'1 % more income is associated with 0.951 % less consumption in the long run.'
		);
	});

	it('reads points on a log exactly: exp(-0.05) - 1 is -4.88 %', () => {
		expect(plain(longRunSentence(unemployment, consumption, -0.05))).toContain('4.88 % less consumption');
	});

	it('reads a log on points per one per cent', () => {
		expect(plain(longRunSentence(income, losses, 150))).toBe(
			'1 % more income is associated with 1.50 percentage points more losses in the long run.'
		);
	});

	it('speaks of units where a transform left no name for them', () => {
		const raw: Measure = { name: 'spread', kind: 'units' };
		expect(longRunSentence(raw, raw, 2)).toBe(
			'One unit more spread is associated with 2.00 units more spread in the long run.'
		);
	});

	it('names the unit of plain quantities and the absence of an effect', () => {
		const price: Measure = { name: 'house prices', kind: 'units', unit: 'index 2015 = 100' };
		expect(longRunSentence(price, losses, 0)).toBe(
			'One unit (index 2015 = 100) more house prices is associated with no change of losses in the long run.'
		);
	});
});

describe('gap', () => {
	it('names side and distance', () => {
		const { text, marked } = gapSentence({
			period: '2026-Q3',
			dependent: { name: 'the loss rate', kind: 'points' },
			gap: -0.2204,
			sd: 0.1377
		});
		expect(marked).toBe('0.220 percentage point below its long run, 1.6 s.d. of the gap');
		expect(text).toBe(`In 2026-Q3 the loss rate stood ${marked}.`);
	});

	it('turns a gap of logs into per cent', () => {
		const { marked } = gapSentence({ period: '2009-Q3', dependent: consumption, gap: 0.02, sd: 0.01 });
		expect(plain(marked)).toBe('2.02 % above its long run, 2.0 s.d. of the gap');
	});

	it('stands on its long run at zero', () => {
		expect(gapSentence({ period: '2009', dependent: losses, gap: 0, sd: 1 }).marked).toBe('on its long run');
	});
});
