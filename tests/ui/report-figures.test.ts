import { describe, expect, it } from 'vitest';
import type { Check } from '$lib/domain/run-result';
import { extentOf } from '$lib/ui/interval';
import { breakMarks } from '$lib/ui/report/break-marks';
import { criticalOf } from '$lib/ui/report/critical';
import {
	aligned,
	decimalsFor,
	digestStart,
	figure,
	ordinalWord,
	pWords,
	reading,
	tied,
	typed
} from '$lib/ui/report/figures';
import { parameterWords } from '$lib/ui/report/parameters';
import { lineName, valueWords } from '$lib/ui/report/policy-lines';
import { rerunWords, statusWords } from '$lib/ui/report/run-facts';
import { facts } from './report-result';

const nb = '\u00a0';

describe('figures of a column', () => {
	it('keeps the decimals, but never rounds a figure away', () => {
		expect(figure(-4.2077)).toBe('−4.208');
		expect(figure(0)).toBe('0.000');
		expect(figure(0.00012)).toBe('0.00012');
		expect(figure(0.0005)).toBe('0.001');
	});

	it('gives small statistics three digits', () => {
		expect(reading(22.814489)).toBe('22.814');
		expect(reading(-0.0065273)).toBe('−0.00653');
		expect(reading(0.1)).toBe('0.100');
		expect(reading(0)).toBe('0');
		expect(reading(30)).toBe('30');
	});

	it('chooses decimals by the smallest standard error, between 3 and 8', () => {
		expect(decimalsFor([0.0273, 0.000198], 3)).toBe(6);
		expect(decimalsFor([12, 3], 3)).toBe(3);
		expect(decimalsFor([null, undefined, 0], 3)).toBe(3);
		expect(decimalsFor([1e-12], 3)).toBe(8);
	});

	it('sets points below each other', () => {
		expect(aligned(['−0.118', '1.02', '7', '·'])).toEqual([
			'−0.118',
			`1.02${nb}`,
			`7${nb.repeat(4)}`,
			`·${nb.repeat(4)}`
		]);
	});

	it('writes p-values, brackets, typed numbers and sentences that do not break inside', () => {
		expect(pWords({ pValue: 0.0001 })).toBe(`<${nb}0.001`);
		expect(pWords({ pText: '0.05 to 0.1' })).toBe(`0.05${nb}to${nb}0.1`);
		expect(pWords({})).toBeNull();
		expect(typed('-0.1870')).toBe('−0.1870');
		expect(tied('F = 2.27, p < 0.001, 5 % critical value')).toBe(
			`F${nb}=${nb}2.27, p${nb}<${nb}0.001, 5${nb}% critical value`
		);
		expect(digestStart(`sha256:${'0123456789ab'.repeat(6).slice(0, 64)}`)).toBe('sha256:0123456789ab…');
	});

	it.each([
		[1, 'first'],
		[3, 'third'],
		[11, '11th'],
		[21, '21st'],
		[22, '22nd'],
		[112, '112th']
	])('%i is %s', (n, word) => expect(ordinalWord(n)).toBe(word));

	it('gives a single point room on its axis', () => {
		expect(extentOf({ claimed: 0.326 })).toEqual([0.163, 0.489]);
		expect(extentOf({ claimed: 0 })).toEqual([-1, 1]);
		expect(extentOf({ owner: { value: 1, low: 0.5, high: 1.5 }, claimed: 2 })).toEqual([0.5, 2]);
	});
});

const check = (changes: Partial<Check>): Check => ({
	id: 'x.y',
	group: 'x',
	verdict: 'holds',
	parameters: {},
	source: '',
	thresholdFrom: [],
	...changes
});

describe('what a statistic is held against', () => {
	it('takes the 5 % critical value, not another level', () => {
		const criticalValues = [
			{ level: '1%', value: -4.37 },
			{ level: '5%', value: -3.7833 }
		];
		expect(criticalOf(check({ criticalValues }))).toEqual({ text: '−3.783' });
		expect(criticalOf(check({ criticalValues: criticalValues.slice(0, 1) }))).toBeNull();
	});

	it('takes bounds from the part whose statistic the check shows', () => {
		const part = {
			about: 'F',
			statistic: { name: 'F', value: 6.7 },
			parameters: { boundI0: 3.79, boundI1: 4.85 }
		};
		const bounds = check({ statistic: { name: 'F', value: 6.7 }, parts: [part] });
		expect(criticalOf(bounds)?.text).toBe('3.790 · 4.850');
	});

	it('does not take the interval of a half-life for a declared range', () => {
		expect(criticalOf(check({ parameters: { low: 3.96, high: 9.48 } }))).toBeNull();
		const declared = { low: 0.9, high: 1.1, from: 1.011, to: 1.039 };
		expect(criticalOf(check({ parameters: declared }))).toMatchObject({
			text: '0.900 to 1.100',
			note: 'declared'
		});
	});
});

describe('words', () => {
	it('says parameters in words, both ends of an interval in one phrase, nothing twice', () => {
		expect(parameterWords({ deterministic: 'ct', maxLag: 8, tableVariables: 3 })).toEqual([
			'deterministic constant and trend',
			'max lag 8',
			'table variables 3'
		]);
		expect(parameterWords({ from: -0.0089, high: 0, low: -0.02, to: -0.0041 }, ['low', 'high'])).toEqual([
			'interval −0.00890 to −0.00410'
		]);
		expect(parameterWords({ from: '1967-Q2', to: '2002-Q2' })).toEqual(['from 1967-Q2', 'to 2002-Q2']);
		expect(parameterWords({ declared: '-', judgedBy: 'bootstrap-iid', crossesAt5: false })).toEqual([
			'declared −',
			'judged by bootstrap iid',
			'crosses its 5 % boundary no'
		]);
	});

	it('names policy lines and writes their values', () => {
		expect(lineName('levels/query')).toBe('level query');
		expect(lineName('checks/cointegration.ecm-t/bootstrap-below')).toBe('bootstrap below');
		expect(valueWords([2, 3])).toBe('2, 3');
		expect(valueWords(-0.5)).toBe('−0.5');
	});

	it('says how a run stands', () => {
		expect(statusWords(facts())).toBe('R-0207 · planned · finished 2026-11-19');
		expect(statusWords({ ref: 'R-0207', purpose: 'planned', state: 'queued' })).toBe(
			'R-0207 · planned · queued'
		);
		expect(rerunWords(facts())).toBe('third of 3 runs of this request, digest equal');
	});

	it('names the date of a break only where one was found', () => {
		const found = check({ id: 'stability.sup-f', rejected: true, parameters: { breakFrom: '1982-Q4' } });
		expect(breakMarks([found])).toEqual([{ period: '1982-Q4', label: 'break, sup-F', limit: true }]);
		expect(breakMarks([{ ...found, rejected: false }])).toEqual([]);
	});
});
