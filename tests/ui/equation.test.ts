import { render } from 'svelte/server';
import { describe, expect, it } from 'vitest';
import Equation from '$lib/ui/Equation.svelte';
import { equationPieces, equationText, type EquationView } from '$lib/ui/equation';

const estimated: EquationView = {
	dependent: 'loss',
	shortRun: [
		{ series: 'unemp', lag: 0, kind: 'difference', coefficient: { value: 0.343, se: 0.044 } },
		{ series: 'loss', lag: 1, kind: 'difference', coefficient: { value: -0.185, se: 0.074 } },
		{ series: 'd2020', lag: 0, kind: 'dummy', coefficient: { value: 0.4, fixed: true } }
	],
	speed: { value: -0.327, se: 0.077 },
	longRun: {
		constant: { value: 1.359, se: 0.232 },
		terms: [
			{ series: 'unemp', coefficient: { value: 0.5, se: 0.034 } },
			{ series: 'rate', coefficient: { value: -0.12 } }
		]
	}
};

const symbolic: EquationView = {
	dependent: 'loss',
	constant: {},
	shortRun: [{ series: 'unemp', lag: 2, kind: 'difference', coefficient: {} }],
	speed: {},
	longRun: { constant: {}, trend: {}, terms: [{ series: 'unemp', coefficient: {} }] }
};

describe('the equation as text', () => {
	it('carries numbers, standard errors and turned signs inside the gap', () => {
		expect(equationText(estimated)).toBe(
			'Δloss(t) = 0.343 (0.044) Δunemp(t) − 0.185 (0.074) Δloss(t−1) + 0.400 fixed d2020 − 0.327 (0.077)' +
				' [ loss(t−1) − 1.359 (0.232) − 0.500 (0.034) unemp(t−1) + 0.120 rate(t−1) ]'
		);
	});

	it('shows letters while nothing is estimated', () => {
		expect(equationText(symbolic)).toBe(
			'Δloss(t) = μ + γ1 Δunemp(t−2) − λ [ loss(t−1) − c − τ trend(t−1) − β1 unemp(t−1) ]'
		);
	});

	it('grows from nothing', () => {
		expect(equationText({ dependent: 'loss', shortRun: [] })).toBe('Δloss(t) = …');
	});

	it('writes a coefficient on the gap of the wrong sign with its plus', () => {
		expect(equationPieces({ ...estimated, speed: { value: 0.02 } }).speed).toMatchObject({
			sign: '+',
			size: '0.020'
		});
	});

	it('opens with a minus but not with a plus', () => {
		const opening = equationPieces({ ...estimated, constant: { value: -0.01 } }).shortRun;
		expect(opening.map(({ sign }) => sign)).toEqual(['−', '+', '−', '+']);
		expect(equationPieces(estimated).shortRun[0]?.sign).toBe('');
	});

	it('keeps the decimals asked for', () => {
		expect(equationText(estimated, 4)).toContain('0.3430 (0.0440)');
	});
});

describe('the equation as set', () => {
	it('names its three parts and reads as mathematics', () => {
		const { body } = render(Equation, { props: { equation: estimated } });
		expect(body).toContain('role="math"');
		for (const brace of ['short run', 'speed of adjustment', 'gap from the long run'])
			expect(body).toContain(brace);
		expect(body).toContain('>0.343</b>');
		expect(body).toContain('>(0.077)</small>');
		expect(body).toContain('>t−1</sub>');
	});

	it('leaves out the parts that are not there', () => {
		const { body } = render(Equation, { props: { equation: { dependent: 'y', shortRun: [] } } });
		expect(body).not.toContain('speed of adjustment');
		expect(body).toContain('…');
	});
});
