import { describe, expect, test } from 'vitest';
import { runBattery } from '$lib/battery/run-battery';
import { checkSentence, partSentence } from '$lib/battery/sentences';
import { canonical } from '$lib/chain/canonical';
import type { Specification } from '$lib/domain/specification';
import { loadCase } from '../reference/reference';
import { caseData, caseSpecification, policy, requestOf } from './cases';

const denmark = loadCase('denmark');
const one = caseSpecification(denmark, 'one-step');
const two = caseSpecification(denmark, 'two-step');

const step = { name: 'shift', kind: 'step', from: '1980-Q1', in: 'long', reason: 'r' } as const;
const both = { name: 'joint', kind: 'step', from: '1981-Q1', in: 'both', reason: 'r' } as const;
const pulse = { name: 'oil', kind: 'pulse', from: '1979-Q2', in: 'short', reason: 'r' } as const;
const late = { name: 'late', kind: 'pulse', from: '1987-Q3', in: 'short', reason: 'r' } as const;
const seasons = { name: 's', kind: 'seasonal', in: 'short', reason: 'r' } as const;

const noConstant = {
	...two,
	longRun: { ...two.longRun, constant: false },
	shortRun: { ...two.shortRun, constant: false }
};

const variants: readonly [string, Specification][] = [
	['one-step, HC3', { ...one, standardErrors: 'hc3' }],
	['one-step, HAC', { ...one, standardErrors: 'hac' }],
	['one-step, trend', { ...one, longRun: { ...one.longRun, trend: true } }],
	['two-step, trend', { ...two, longRun: { ...two.longRun, trend: true } }],
	['seasonal dummies', { ...one, dummies: [seasons] }],
	['a pulse, fitted exactly, with HC3', { ...one, dummies: [pulse], standardErrors: 'hc3' }],
	['a pulse in the last period', { ...two, dummies: [late] }],
	['a step in the long run', { ...two, dummies: [step] }],
	['a step in the long run, one-step', { ...one, dummies: [step] }],
	['a step in both', { ...one, dummies: [both] }],
	['no constant anywhere', noConstant],
	['a fixed short-run coefficient', { ...one, fixed: [{ term: 'd.LRY.l0', value: 0.5, reason: 'r' }] }],
	['a fixed speed', { ...one, fixed: [{ term: 'y.l1', value: -0.2, reason: 'r' }] }],
	['a fixed gap coefficient', { ...two, fixed: [{ term: 'ec.l1', value: -0.2, reason: 'r' }] }],
	['no short run at all', { ...one, shortRun: { own: [], drivers: [], constant: false } }],
	['twelve periods', { ...one, sample: { from: '1974-Q1', to: '1976-Q4' } }],
	['fewer periods than coefficients', { ...one, sample: { from: '1974-Q1', to: '1975-Q4' } }],
	['two periods', { ...one, sample: { from: '1974-Q1', to: '1974-Q2' } }],
	['a sample before the data', { ...one, sample: { from: '1950-Q1', to: '1955-Q4' } }],
	['a sample longer than the data', { ...one, sample: { from: '1960-Q1', to: '2020-Q4' } }],
	[
		'a driver twice over',
		{
			...two,
			series: [...two.series, { ...two.series[1]!, name: 'twin' }],
			longRun: {
				...two.longRun,
				drivers: [...two.longRun.drivers, { ...two.longRun.drivers[0]!, series: 'twin' }]
			}
		}
	],
	[
		'an overlapping dependent variable',
		{
			...two,
			series: two.series.map((series, i) =>
				i === 0 ? { ...series, transform: [{ step: 'sum', of: 4 }] } : series
			)
		}
	],
	[
		'a logarithm of a negative figure',
		{
			...two,
			series: two.series.map((series, i) =>
				i === 1 ? { ...series, transform: [{ step: 'scale', by: -1 }, { step: 'log' }] } : series
			)
		}
	]
];

describe('whatever the specification, a result is finite, canonical, and speaks in sentences', () => {
	test.each(variants)('%s', (_, specification) => {
		const result = runBattery(requestOf(specification), policy, caseData(denmark));
		expect(JSON.parse(canonical(result))).toEqual(JSON.parse(JSON.stringify(result)));
		expect(JSON.stringify(result)).not.toMatch(/NaN|Infinity/);
		const figures = (value: unknown): number[] =>
			typeof value === 'number'
				? [value]
				: value !== null && typeof value === 'object'
					? Object.values(value).flatMap(figures)
					: [];
		expect(figures(result).every(Number.isFinite)).toBe(true);
		expect(result.checks).toHaveLength(28);
		for (const check of result.checks) {
			expect(checkSentence(check), check.id).toMatch(/\S.*[.?]$/);
			expect(checkSentence(check), check.id).not.toMatch(/undefined|NaN|null\b(?! of)|\[object/);
			if (check.verdict === 'not assessable') expect(check.reason, check.id).toBeDefined();
			for (const part of check.parts ?? [])
				expect(partSentence(check.id, part), `${check.id} ${part.about}`).not.toMatch(
					/undefined|NaN|\[object/
				);
		}
	});

	test('a fixed coefficient stands in the result as given, without an error', () => {
		const result = runBattery(
			requestOf(variants.find(([name]) => name === 'a fixed speed')![1]),
			policy,
			caseData(denmark)
		);
		const fixed = result.estimates!.equation.terms.find(({ term }) => term.code === 'y.l1')!;
		expect(fixed).toMatchObject({ value: -0.2, se: null, fixed: true });
		expect(result.checks.find(({ id }) => id === 'cointegration.ecm-t')).toMatchObject({
			verdict: 'not assessable',
			reason: 'given'
		});
	});

	test('overlapping targets are judged beyond their span only', () => {
		const result = runBattery(
			requestOf(variants.find(([name]) => name.startsWith('an overlapping'))![1]),
			policy,
			caseData(denmark)
		);
		const check = result.checks.find(({ id }) => id === 'residual.autocorrelation')!;
		expect(check.because).toContain('overlapping-targets');
		expect(check.parts!.map(({ about }) => about)).toEqual(['lag 4', 'lag 5', 'lag 6', 'lag 7']);
	});
});
