import { describe, expect, it } from 'vitest';
import type { Estimates, TermEstimate } from '$lib/domain/run-result';
import type { Specification } from '$lib/domain/specification';
import { equationTerms, longRunTerms, type SpecificationTerm } from '$lib/domain/specification-terms';
import { equationText } from '$lib/ui/equation';
import { equationOfEstimates, equationOfSpecification } from '$lib/ui/estimated-equation';
import { NO_BREAK } from '$lib/ui/format';
import { measureOf, runSentences } from '$lib/ui/run-sentences';

const twoStep: Specification = {
	schema: 1,
	frequency: 'quarterly',
	series: [
		{ name: 'lcons', column: 'realcons', unit: 'USD bn', transform: [{ step: 'log' }] },
		{ name: 'linc', column: 'realdpi', unit: 'USD bn', transform: [{ step: 'log' }] },
		{ name: 'tbill', column: 'tbilrate', unit: '% a year', transform: [] }
	],
	dependent: 'lcons',
	longRun: {
		drivers: [{ series: 'linc', sign: '+', plausible: [0.8, 1.2], rationale: 'saving is a stable share' }],
		constant: true,
		trend: false
	},
	shortRun: {
		own: [1],
		drivers: [
			{ series: 'linc', lags: [0], sign: '+' },
			{ series: 'tbill', lags: [2], sign: '-' }
		],
		constant: true
	},
	dummies: [{ name: 'oil', kind: 'pulse', from: '1974-Q1', in: 'short', reason: 'embargo' }],
	fixed: [],
	sample: { from: '1959-Q1', to: '2009-Q3' },
	estimator: { kind: 'two-step' },
	standardErrors: 'ols'
};
const oneStep: Specification = {
	...twoStep,
	estimator: { kind: 'one-step' },
	shortRun: { ...twoStep.shortRun, constant: false },
	dummies: []
};

const estimate = (term: SpecificationTerm, value: number, se: number | null = 0.01): TermEstimate => ({
	term,
	value,
	se,
	t: null,
	p: null
});

/** Estimates whose n-th coefficient is n/10, so that each can be told from the others. */
function numbered(spec: Specification, speed: number): Estimates {
	const fit = {
		n: 200,
		k: 6,
		df: 194,
		rss: 1,
		sigma: 1,
		r2: 0.5,
		adjustedR2: 0.5,
		logLikelihood: 1,
		aic: 1,
		bic: 1,
		hqic: 1,
		durbinWatson: 2,
		conditionNumber: null
	};
	return {
		estimator: spec.estimator.kind,
		standardErrors: { kind: 'ols' },
		speed: { value: speed, se: 0.05, t: null, p: null },
		halfLife: { value: 2.2, low: 1, high: 4, level: 0.95 },
		longRun: longRunTerms(spec).map((term, i) =>
			estimate(term, (i + 1) / 10, spec.estimator.kind === 'one-step' ? 0.02 : null)
		),
		longRunOneStep: null,
		longRunCovariance: null,
		equation: {
			terms: equationTerms(spec).map((term, i) =>
				estimate(term, term.kind === 'gap' ? -speed : (i + 1) / 10)
			),
			covariance: { terms: [], rows: [] },
			fit,
			firstPeriod: '1959-Q3',
			lastPeriod: '2009-Q3'
		},
		static: null
	};
}

describe('the equation of a specification', () => {
	it('has letters for what will be estimated, drivers before dummies', () => {
		expect(equationText(equationOfSpecification(twoStep))).toBe(
			'Δlcons(t) = μ + γ1 Δlcons(t−1) + γ2 Δlinc(t) + γ3 Δtbill(t−2) + δ1 oil − λ [ lcons(t−1) − c − β1 linc(t−1) ]'
		);
	});

	it('shows the one-step form with its gap too', () => {
		expect(equationText(equationOfSpecification(oneStep))).toBe(
			'Δlcons(t) = γ1 Δlcons(t−1) + γ2 Δlinc(t) + γ3 Δtbill(t−2) − λ [ lcons(t−1) − c − β1 linc(t−1) ]'
		);
	});

	it('grows: without a driver of the long run there is no gap yet', () => {
		const started = {
			...twoStep,
			longRun: { drivers: [], constant: true, trend: false },
			dummies: [],
			shortRun: { own: [], drivers: [], constant: false }
		};
		expect(equationText(equationOfSpecification(started))).toBe('Δlcons(t) = …');
	});

	it('writes imposed and fixed values as numbers', () => {
		const imposed: Specification = {
			...twoStep,
			fixed: [{ term: 'd.y.l1', value: 0.25, reason: 'agreed' }],
			estimator: { kind: 'imposed', imposed: { constant: -0.1, slopes: [{ series: 'linc', value: 1 }] } }
		};
		const text = equationText(equationOfSpecification(imposed));
		expect(text).toContain('0.250 fixed Δlcons(t−1)');
		expect(text).toContain('[ lcons(t−1) + 0.100 fixed − 1.000 fixed linc(t−1) ]');
	});
});

describe('the equation of estimates', () => {
	it('puts each number at its own term; the gap carries the coefficient that people type', () => {
		expect(equationText(equationOfEstimates(twoStep, numbered(twoStep, 0.187)))).toBe(
			'Δlcons(t) = 0.100 (0.010) + 0.400 (0.010) Δlcons(t−1) + 0.500 (0.010) Δlinc(t) + 0.600 (0.010) Δtbill(t−2)' +
				' + 0.200 (0.010) oil − 0.187 (0.010) [ lcons(t−1) − 0.100 − 0.200 linc(t−1) ]'
		);
	});

	it('shows a one-step estimate with speed and long run, not with its levels', () => {
		const text = equationText(equationOfEstimates(oneStep, numbered(oneStep, 0.187)));
		expect(text).toContain('− 0.187 (0.050) [ lcons(t−1) − 0.100 (0.020) − 0.200 (0.020) linc(t−1) ]');
		expect(text).not.toMatch(/\) lcons\(t−1\) \+/);
	});
});

describe('the sentences of a run', () => {
	const model = {
		periods: ['2009-Q2', '2009-Q3'],
		level: [9, 9.1],
		longRun: [9, 9],
		gap: [0, 0.02],
		residuals: [null, 0],
		gapSd: 0.01
	};

	it('say speed, slopes and the last gap', () => {
		const said = runSentences({ specification: twoStep, estimates: numbered(twoStep, 0.187), model });
		expect(said.sentences.join(' ').replaceAll(NO_BREAK, ' ')).toBe(
			'Speed of adjustment: 18.7 % of the equilibrium error (gap) in a quarter; half-life of a shock 2.20 quarters.' +
				' 1 % more linc is associated with 0.200 % more lcons in the long run.'
		);
		expect(said.gap?.marked.replaceAll(NO_BREAK, ' ')).toBe('2.02 % above its long run, 2.0 s.d. of the gap');
	});

	it('say nothing where nothing was estimated, and nothing of a gap that is not there', () => {
		expect(runSentences({ specification: twoStep, estimates: null, model: null })).toEqual({ sentences: [] });
		expect(
			runSentences({ specification: twoStep, estimates: numbered(twoStep, 0.2), model: null }).gap
		).toBeUndefined();
	});

	it('read the measure from unit and transforms', () => {
		const series = { name: 'x', column: 'x', unit: 'per cent', transform: [] };
		expect(measureOf(series).kind).toBe('points');
		expect(measureOf({ ...series, transform: [{ step: 'mean', of: 4 }] }).kind).toBe('points');
		expect(measureOf({ ...series, unit: 'EUR m' })).toEqual({ name: 'x', kind: 'units', unit: 'EUR m' });
		expect(measureOf({ ...series, transform: [{ step: 'log' }, { step: 'scale', by: 100 }] })).toEqual({
			name: 'x',
			kind: 'units'
		});
		expect(measureOf({ ...series, transform: [{ step: 'logit' }] }).kind).toBe('units');
	});
});
