import { describe, expect, it } from 'vitest';
import { parseClaims } from '$lib/domain/register-claims';
import { namedTerms } from '$lib/domain/register-term-names';
import { lossOnUnemployment } from './specification-example';

const specification = lossOnUnemployment();
const read = (text: string) => parseClaims(text, specification);

describe('a pasted table of claimed coefficients', () => {
	it('names the terms of the equation as people read them', () => {
		expect(namedTerms(specification)).toEqual([
			{ code: 'long.const', name: 'constant, long run' },
			{ code: 'long.unemp', name: 'unemp, long run' },
			{ code: 'ec.l1', name: 'gap(t−1)' },
			{ code: 'd.y.l1', name: 'Δloss(t−1)' },
			{ code: 'd.unemp.l0', name: 'Δunemp(t)' }
		]);
	});

	it('reads tabs with typeset names and keeps the digits typed', () => {
		const { coefficients, notes, issues } = read(
			'term\tvalue\tse\nΔunemp(t)\t0.3430\t0.044\nΔloss(t−1)\t0.185\t0.0740\ngap(t−1)\t−0.3270***\t(0.077)\nunemp, long run\t0.500\t0.034\n'
		);
		expect(issues).toEqual([]);
		expect(coefficients).toEqual([
			{ term: 'd.unemp.l0', value: '0.3430', se: '0.044' },
			{ term: 'd.y.l1', value: '0.185', se: '0.0740' },
			{ term: 'ec.l1', value: '-0.3270', se: '0.077' },
			{ term: 'long.unemp', value: '0.500', se: '0.034' }
		]);
		expect(notes).toEqual([
			'Stars after a number were left out.',
			'A typographic minus was read as a minus.',
			'Brackets around a number were left out: it was read as a standard error.'
		]);
	});

	it.each([
		['codes', 'd.unemp.l0 0.343 0.044', 'd.unemp.l0'],
		['a D and a lag in brackets', 'D(loss(-1)) 0.343 0.044', 'd.y.l1'],
		['an index after an underscore', 'Δloss_{t-1} 0.343 0.044', 'd.y.l1'],
		['a typeset index', 'Δlossₜ₋₁ 0.343 0.044', 'd.y.l1'],
		['the increment sign', '∆unemp 0.343 0.044', 'd.unemp.l0'],
		['an index without brackets', 'Δloss t−1 0.343 0.044', 'd.y.l1'],
		['square brackets and blanks', 'Δ loss [t - 1]   0.343   0.044', 'd.y.l1'],
		['another case', 'UNEMP, long run;0.343;0.044', 'long.unemp'],
		['a name with blanks', 'speed of adjustment  0.343  0.044', 'ec.l1']
	])('accepts %s', (_, text, term) => {
		expect(read(text)).toMatchObject({ issues: [], coefficients: [{ term, value: '0.343', se: '0.044' }] });
	});

	it('reads commas between columns, and a standard error on the line below', () => {
		expect(read('gap(t-1),-0.327,0.077\nΔunemp(t),0.343').coefficients).toEqual([
			{ term: 'ec.l1', value: '-0.327', se: '0.077' },
			{ term: 'd.unemp.l0', value: '0.343' }
		]);
		expect(read('gap(t-1)\t-0.327**\n\t(0.077)\nΔunemp(t)\t0.343\n\t(0.044)').coefficients).toEqual([
			{ term: 'ec.l1', value: '-0.327', se: '0.077' },
			{ term: 'd.unemp.l0', value: '0.343', se: '0.044' }
		]);
	});

	it('reads a decimal comma between tabs and says so', () => {
		const { coefficients, notes } = read('gap(t-1)\t-0,3270\t0,077');
		expect(coefficients).toEqual([{ term: 'ec.l1', value: '-0.3270', se: '0.077' }]);
		expect(notes).toEqual(['A decimal comma was read as a decimal point.']);
	});

	it.each([
		['an unknown term', 'gdp(t)\t0.1\t0.2', 1, 'term', 'no term of this equation'],
		['a term twice', 'gap(t-1)\t0.1\nec.l1\t0.2', 2, 'term', 'first on line 1'],
		['words for a number', 'gap(t-1)\tabout 0.1', 1, 'value', 'not a number'],
		['a missing value', 'gap(t-1)', 1, 'value', 'not a number'],
		['a bracketed value', 'gap(t-1)\t(0.1)', 1, 'value', 'the value is missing'],
		['a negative standard error', 'gap(t-1)\t0.1\t-0.2', 1, 'standard error', 'not negative'],
		['a thousands mark', 'gap(t-1)\t1,234.5', 1, 'value', 'not a number'],
		['infinity', 'gap(t-1)\t1e999', 1, 'value', 'beyond what a number can hold'],
		['a fourth column', 'gap(t-1)\t0.1\t0.2\t4.1', 1, '4', 'Three columns']
	])('refuses %s and names the cell', (_, text, row, column, words) => {
		const { issues, coefficients } = read(text);
		expect(coefficients).toEqual([]);
		expect(issues).toHaveLength(1);
		expect(issues[0]).toMatchObject({ row, column, pointer: '/claimed' });
		expect(issues[0]!.message).toContain(words);
	});

	it('refuses an empty paste', () => {
		expect(read(' \n\n').issues).toHaveLength(1);
	});
});
