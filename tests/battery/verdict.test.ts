import { describe, expect, test } from 'vitest';
import {
	adjustmentVerdict,
	badRejection,
	criticalAt,
	goodRejection,
	notBetterThanQuery,
	notWorseThanQuery,
	rangeVerdict,
	signVerdict,
	worst
} from '$lib/battery/verdict';

const levels = { query: 0.05, fails: 0.01, shown: 0.05 };

describe('a rejection is bad', () => {
	test.each([
		[0.5, 'holds'],
		[0.05, 'holds'],
		[0.0499, 'query'],
		[0.01, 'query'],
		[0.0099, 'fails'],
		[0, 'fails']
	])('p = %d: %s', (p, verdict) => expect(badRejection(p, levels)).toBe(verdict));
});

describe('a rejection is good', () => {
	test.each([
		['passed, p agrees', { passes: true, p: { value: 0.02, asymptotic: true } }, 'holds', []],
		[
			'not passed: not shown, never a fail',
			{ passes: false, p: { value: 0.4, asymptotic: true } },
			'query',
			[]
		],
		[
			'critical value and asymptotic p differ',
			{ passes: true, p: { value: 0.06, asymptotic: true } },
			'query',
			['critical-and-p-differ']
		],
		[
			'the other way round',
			{ passes: false, p: { value: 0.04, asymptotic: true } },
			'query',
			['critical-and-p-differ']
		],
		['an exact p decides alone', { passes: false, p: { value: 0.03, asymptotic: false } }, 'holds', []],
		['no table, exact p above', { passes: undefined, p: { value: 0.3, asymptotic: false } }, 'query', []],
		[
			'a speed that does not correct, although passed',
			{ passes: true, refuted: true },
			'fails',
			['does-not-correct']
		],
		[
			'a speed that does not correct, not passed',
			{ passes: false, refuted: true },
			'fails',
			['does-not-correct']
		],
		[
			'opposite null rejected, not shown',
			{ passes: false, opposed: true },
			'fails',
			['opposite-null-rejected']
		],
		[
			'opposite null rejected beside a passed test: a contradiction',
			{ passes: true, opposed: true },
			'query',
			['opposite-null-rejected']
		]
	] as const)('%s', (_, evidence, verdict, because) => {
		const judged = goodRejection(evidence, 0.05);
		expect(judged?.verdict).toBe(verdict);
		expect(judged?.because).toEqual(because);
	});

	test('neither table nor p-value: nothing is judged', () => {
		expect(goodRejection({ passes: undefined }, 0.05)).toBeUndefined();
	});
});

describe('speed of adjustment', () => {
	test.each([
		[-0.1, 'fails'],
		[0, 'fails'],
		[0.001, 'holds'],
		[0.999, 'holds'],
		[1, 'query'],
		[1.99, 'query'],
		[2, 'fails']
	])('lambda = %d: %s', (lambda, verdict) => expect(adjustmentVerdict(lambda, 1, 2)).toBe(verdict));
});

describe('declared signs and ranges', () => {
	test.each([
		[1, 0.1, '+', 'holds'],
		[-1, 0.1, '-', 'holds'],
		[-1, 0.1, 'any', 'holds'],
		[-1, 0.1, '+', 'fails'],
		[-0.09, 0.1, '+', 'query'],
		[-0.11, 0.1, '+', 'fails'],
		[-0.09, null, '+', 'fails'],
		[0, 0.1, '-', 'query']
	] as const)('slope %d (se %s), declared %s: %s', (value, se, sign, verdict) =>
		expect(signVerdict(value, se, sign, 1)).toBe(verdict)
	);

	test.each([
		[1, { low: 0.95, high: 1.05 }, 'holds'],
		[1, { low: 0.5, high: 1.5 }, 'query'],
		[1, null, 'holds'],
		[2, { low: 1.9, high: 2.1 }, 'fails'],
		[1.3, { low: 1.1, high: 1.5 }, 'query'],
		[2, null, 'fails']
	] as const)('slope %d, interval %o: %s', (value, interval, verdict) =>
		expect(rangeVerdict(value, interval, [0.8, 1.2])).toBe(verdict)
	);
});

describe('several verdicts', () => {
	test('the worse of several counts; not assessable only where nothing else was found', () => {
		expect(worst(['holds', 'fails', 'query'])).toBe('fails');
		expect(worst(['holds', 'not assessable'])).toBe('holds');
		expect(worst(['not assessable', 'query'])).toBe('query');
		expect(worst(['not assessable', 'not assessable'])).toBe('not assessable');
		expect(worst([])).toBe('not assessable');
	});

	test('caps leave not assessable as it is', () => {
		expect(notBetterThanQuery('not assessable')).toBe('not assessable');
		expect(notBetterThanQuery('holds')).toBe('query');
		expect(notWorseThanQuery('fails')).toBe('query');
		expect(notWorseThanQuery('not assessable')).toBe('not assessable');
	});

	test('a level that the table lacks has no critical value', () => {
		expect(criticalAt({ '5%': -2.9 }, 0.05)).toBe(-2.9);
		expect(criticalAt({ '2.5%': -3.1 }, 0.025)).toBe(-3.1);
		expect(criticalAt({ '5%': -2.9 }, 0.03)).toBeUndefined();
		expect(criticalAt(null, 0.05)).toBeUndefined();
	});
});
