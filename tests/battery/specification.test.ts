import { describe, expect, test } from 'vitest';
import { Invalid, type Issue } from '$lib/domain/faults';
import { parseSpecification } from '$lib/domain/specification-issues';
import { equationTerms, longRunTerms, termsOf } from '$lib/domain/specification-terms';
import type { Specification } from '$lib/domain/specification';

const sound: Specification = {
	schema: 1,
	frequency: 'quarterly',
	series: [
		{
			name: 'loss',
			column: 'loss_rate',
			unit: 'per cent',
			transform: [{ step: 'scale', by: 0.01 }, { step: 'logit' }]
		},
		{ name: 'jobless', column: 'u', unit: 'per cent', transform: [] },
		{ name: 'rate', column: 'r', unit: 'per cent', transform: [{ step: 'lag', by: 1 }] }
	],
	dependent: 'loss',
	longRun: {
		drivers: [{ series: 'jobless', sign: '+', plausible: [0, 1], rationale: 'Income lost.' }],
		constant: true,
		trend: false
	},
	shortRun: { own: [2, 1], drivers: [{ series: 'rate', lags: [3, 0], sign: 'any' }], constant: true },
	dummies: [
		{ name: 'covid', kind: 'pulse', from: '2020-Q2', to: '2020-Q3', in: 'short', reason: 'Moratoria.' }
	],
	fixed: [],
	sample: { from: '1998-Q1', to: '2025-Q4' },
	estimator: { kind: 'two-step' },
	standardErrors: 'hac'
};

const issuesOf = (change: Record<string, unknown>): readonly Issue[] => {
	try {
		parseSpecification({ ...structuredClone(sound), ...change });
	} catch (error) {
		if (error instanceof Invalid) return error.issues;
		throw error;
	}
	return [];
};

const series = (...names: string[]) => names.map((name) => ({ ...sound.series[0]!, name }));
const driver = (series: string, plausible: [number, number] = [0, 1]) => ({
	series,
	sign: '+',
	plausible,
	rationale: 'r'
});
const long = (...drivers: ReturnType<typeof driver>[]) => ({ ...sound.longRun, drivers });

test('a sound specification is taken as it is', () => {
	expect(issuesOf({})).toEqual([]);
	expect(parseSpecification(sound)).toEqual(sound);
});

describe('what does not fit together is named with a pointer and how to mend it', () => {
	test.each([
		['an unknown key', { typo: 1 }, '', 'typo'],
		['a name twice', { series: series('loss', 'jobless', 'rate', 'rate') }, '/series/3/name', 'used twice'],
		[
			'a reserved name',
			{ series: [...sound.series, ...series('const')] },
			'/series/3/name',
			'choose another'
		],
		[
			'a name with a dot',
			{ series: [...sound.series, ...series('a.b')] },
			'/series/3/name',
			'letters, digits'
		],
		['an unknown dependent', { dependent: 'gdp' }, '/dependent', 'no series named gdp'],
		[
			'an unknown driver',
			{ longRun: long(driver('gdp')) },
			'/longRun/drivers/0/series',
			'no series named gdp'
		],
		[
			'a variable that drives itself',
			{ longRun: long(driver('loss')) },
			'/longRun/drivers/0/series',
			'drive itself'
		],
		[
			'a driver twice',
			{ longRun: long(driver('rate'), driver('rate')) },
			'/longRun/drivers/1/series',
			'twice'
		],
		['no driver', { longRun: long() }, '/longRun/drivers', 'at least one driver'],
		[
			'a range reversed',
			{ longRun: long(driver('rate', [2, 1])) },
			'/longRun/drivers/0/plausible',
			'exchange'
		],
		['an own lag twice', { shortRun: { ...sound.shortRun, own: [1, 1] } }, '/shortRun/own/1', 'twice'],
		['a lag of the own change at 0', { shortRun: { ...sound.shortRun, own: [0] } }, '/shortRun/own/0', '1'],
		['a sample reversed', { sample: { from: '2025-Q4', to: '1998-Q1' } }, '/sample/to', 'exchange'],
		[
			'a period of another frequency',
			{ sample: { from: '1998-01', to: '2025-Q4' } },
			'/sample/from',
			'1974-Q1'
		],
		[
			'a dummy without a period',
			{ dummies: [{ ...sound.dummies[0]!, from: undefined, to: undefined }] },
			'/dummies/0/from',
			'Say from which'
		],
		['imposed without values', { estimator: { kind: 'imposed' } }, '/estimator/imposed', 'Give the constant'],
		[
			'an imposed slope missing',
			{ estimator: { kind: 'imposed', imposed: { constant: 1, slopes: [] } } },
			'/estimator/imposed/slopes',
			'jobless'
		],
		['dynamic least squares', { estimator: { kind: 'dols' } }, '/estimator/kind', 'not offered yet'],
		['fully modified least squares', { estimator: { kind: 'fm' } }, '/estimator/kind', 'not offered yet'],
		[
			'nothing given from elsewhere',
			{ estimator: { kind: 'elsewhere' } },
			'/claimed/coefficients',
			'Give the coefficient'
		],
		[
			'a fixed term outside the equation',
			{ fixed: [{ term: 'd.rate.l9', value: 1, reason: 'r' }] },
			'/fixed/0/term',
			'not in the equation'
		],
		[
			'a claim for an unknown term',
			{ claimed: { source: 's', coefficients: [{ term: 'x', value: '1.0' }] } },
			'/claimed/coefficients/0/term',
			'not a term'
		],
		[
			'a claim that is no number',
			{ claimed: { source: 's', coefficients: [{ term: 'const', value: 'about 1' }] } },
			'/claimed/coefficients/0/value',
			'digits'
		]
	] as const)('%s', (_, change, pointer, words) => {
		const issues = issuesOf(change);
		expect(issues.map((issue) => issue.pointer)).toContain(pointer);
		expect(issues.find((issue) => issue.pointer === pointer)!.message).toContain(words);
	});

	test('several faults are named at once', () => {
		expect(issuesOf({ dependent: 'gdp', sample: { from: '2025-Q4', to: '1998-Q1' } }).length).toBeGreaterThan(
			1
		);
	});
});

describe('terms of an equation', () => {
	test('two-step: the relation, then the gap and the changes in rising lags', () => {
		expect(longRunTerms(sound).map(({ code }) => code)).toEqual(['long.const', 'long.jobless']);
		expect(equationTerms(sound).map(({ code }) => code)).toEqual([
			'const',
			'covid',
			'ec.l1',
			'd.y.l1',
			'd.y.l2',
			'd.rate.l0',
			'd.rate.l3'
		]);
	});

	test('one-step: lagged levels in place of the gap, which can still be claimed', () => {
		const spec: Specification = { ...sound, estimator: { kind: 'one-step' } };
		expect(equationTerms(spec).map(({ code }) => code)).toContain('jobless.l1');
		expect(equationTerms(spec).map(({ code }) => code)).not.toContain('ec.l1');
		expect(termsOf(spec).map(({ code }) => code)).toContain('ec.l1');
	});

	test('each term carries what a screen typesets', () => {
		const term = equationTerms(sound).find(({ code }) => code === 'd.y.l2')!;
		expect(term).toEqual({
			code: 'd.y.l2',
			part: 'short',
			kind: 'difference',
			series: 'loss',
			lag: 2,
			difference: true
		});
	});

	test('seasonal dummies are one term a season but the last', () => {
		const spec: Specification = {
			...sound,
			dummies: [{ name: 's', kind: 'seasonal', in: 'short', reason: 'Seasons.' }]
		};
		expect(
			equationTerms(spec)
				.filter(({ kind }) => kind === 'dummy')
				.map(({ code }) => code)
		).toEqual(['s1', 's2', 's3']);
	});
});
