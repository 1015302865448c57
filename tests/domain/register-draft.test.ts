import { describe, expect, it } from 'vitest';
import { draftOf, draftOfSpecification, editRows, emptyDraft } from '$lib/domain/register-draft';
import { draftIssues, readDraft } from '$lib/domain/register-draft-specification';
import { parseLags, parseSteps, stepsText } from '$lib/domain/register-steps';
import type { Specification } from '$lib/domain/specification';
import { structuralIssues } from '$lib/domain/specification-issues';
import { lossOnUnemployment } from './specification-example';

const declared = [
	{ series: 'unemp', sign: '+', low: 0.1, high: 1, rationale: 'Losses follow unemployment.' },
	{ series: 'gdp', sign: '-', low: -3, high: 0, rationale: 'Growth lowers losses.' }
] as const;

/** What a browser would send for a draft. */
const entriesOf = (draft: object): [string, string][] =>
	Object.entries(draft).flatMap(([name, value]): [string, string][] => {
		if (typeof value === 'string') return [[name, value]];
		if (typeof value === 'boolean') return value ? [[name, 'on']] : [];
		return (value as Record<string, string>[]).flatMap((row, i) =>
			Object.entries(row).map(([column, typed]): [string, string] => [`${name}.${i}.${column}`, typed])
		);
	});

describe('transforms and lags as typed', () => {
	it.each([
		['', []],
		['level', []],
		['log', [{ step: 'log' }]],
		[
			'ratio(balances), scale(100), log, lag(2)',
			[
				{ step: 'ratio', column: 'balances' },
				{ step: 'scale', by: 100 },
				{ step: 'log' },
				{ step: 'lag', by: 2 }
			]
		],
		[
			'deflate(CPI, all items), mean(4)',
			[
				{ step: 'deflate', column: 'CPI, all items' },
				{ step: 'mean', of: 4 }
			]
		]
	])('reads "%s"', (text, steps) => {
		expect(parseSteps(text)).toEqual({ steps });
		expect(parseSteps(stepsText(steps as never))).toEqual({ steps });
	});

	it.each(['logs', 'log(2)', 'ratio', 'scale()', 'mean(x)', 'lag(1.5)'])('refuses "%s"', (text) => {
		expect(parseSteps(text).fault).toBeTruthy();
	});

	it('reads lags and ranges of lags', () => {
		expect(parseLags('0, 2;4')).toEqual({ lags: [0, 2, 4] });
		expect(parseLags('1-4')).toEqual({ lags: [1, 2, 3, 4] });
		expect(parseLags('')).toEqual({ lags: [] });
		expect(parseLags('t-1').fault).toContain('"t-1" is no lag');
	});
});

describe('a specification in a form', () => {
	const whole: Specification = lossOnUnemployment({
		series: [
			...lossOnUnemployment().series,
			{ name: 'gdp', column: 'GDP', unit: 'index', transform: [{ step: 'log' }] }
		],
		shortRun: {
			own: [1, 3],
			drivers: [
				{ series: 'unemp', lags: [0, 2], sign: 'any' },
				{ series: 'gdp', lags: [1], sign: '-' }
			],
			constant: false
		},
		dummies: [{ name: 'strike', kind: 'pulse', from: '2008-Q4', in: 'short', reason: 'Postal strike.' }],
		fixed: [{ term: 'd.gdp.l1', value: -0.1, reason: 'Panel estimate.' }],
		claimed: { source: 'Table 4', coefficients: [{ term: 'ec.l1', value: '-0.3270', se: '0.077' }] }
	});

	it('comes back as it was, through the form and what the browser sends', () => {
		const draft = draftOf(entriesOf(draftOfSpecification(whole)));
		const read = readDraft(draft, declared);
		expect(read.issues).toEqual([]);
		expect(read.specification).toEqual(whole);
		expect(structuralIssues(read.specification)).toEqual([]);
	});

	it('keeps imposed slopes', () => {
		const imposed = lossOnUnemployment({
			estimator: { kind: 'imposed', imposed: { constant: 0.9, slopes: [{ series: 'unemp', value: 0.5 }] } }
		});
		expect(readDraft(draftOfSpecification(imposed), declared).specification.estimator).toEqual(
			imposed.estimator
		);
		const blank = { ...draftOfSpecification(imposed), long: [{ series: 'unemp', slope: '' }] };
		expect(readDraft(blank, declared).issues).toEqual([
			{ field: 'long.0.slope', message: 'Write the number.' }
		]);
	});

	it('takes signs and ranges from the declarations, and asks for those that are missing', () => {
		const draft = draftOfSpecification(whole);
		expect(readDraft(draft, declared).specification.longRun.drivers).toEqual([
			{ series: 'unemp', sign: '+', plausible: [0.1, 1], rationale: 'Losses follow unemployment.' }
		]);
		expect(readDraft(draft, declared.slice(0, 1)).issues).toEqual([
			{ field: 'short.1.series', message: 'Declare the sign and plausible range of gdp first.' }
		]);
	});

	it('names the field of an issue, also behind rows left empty', () => {
		const draft = {
			...draftOfSpecification(whole),
			series: [
				{ name: '', column: '', unit: '', transform: '' },
				{ name: 'loss', column: '', unit: '', transform: 'logs' }
			],
			from: '2008-1',
			claims: 'gap(t-1)\tabout 0.3'
		};
		const read = readDraft(draft, declared);
		expect(read.issues.map(({ field }) => field)).toEqual(['series.1.transform', 'claims']);
		expect(read.specification.series).toMatchObject([{ name: 'loss', column: 'loss' }]);
		const found = draftIssues(read, [
			{ pointer: '/series/0/name', message: 'x' },
			{ pointer: '/sample/from', message: 'x' },
			{ pointer: '/shortRun/drivers/1/lags/0', message: 'x' },
			{ pointer: '/claimed/coefficients/3/term', message: 'x' },
			{ pointer: '/nothing', message: 'x' }
		]);
		expect(found.map(({ field }) => field)).toEqual(['series.1.name', 'from', 'short.1.lags', 'claims', '']);
	});

	it('grows and shrinks row by row', () => {
		const draft = emptyDraft({ frequency: 'quarterly', drivers: ['unemp'] });
		expect(draft.series).toHaveLength(2);
		const more = editRows(draft, 'add:dummies');
		expect(more.dummies).toEqual([{ name: '', kind: '', from: '', to: '', in: '', reason: '' }]);
		expect(editRows(more, 'remove:series:0').series).toMatchObject([{ name: 'unemp' }]);
		for (const edit of ['add:constructor', 'remove', 'drop:series:0', ''])
			expect(editRows(draft, edit)).toBe(draft);
	});

	it('cannot be made to hold what no form sends', () => {
		const draft = draftOf([
			['__proto__', 'x'],
			['series.9999.name', 'x'],
			['series.1.evil', 'x'],
			['series.5.name', 'five'],
			['series.2.name', 'two'],
			['dependent', ' loss '],
			['longConstant', 'on']
		]);
		expect(draft.series.map(({ name }) => name)).toEqual(['', 'two', 'five']);
		expect(draft).toMatchObject({ dependent: 'loss', longConstant: true, longTrend: false, fixed: [] });
	});
});
