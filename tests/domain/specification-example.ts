import type { Specification } from '$lib/domain/specification';

/** A quarterly two-step model of a loss rate on unemployment, as the register's tests use it. */
export const lossOnUnemployment = (changed: Partial<Specification> = {}): Specification => ({
	schema: 1,
	frequency: 'quarterly',
	series: [
		{ name: 'loss', column: 'loss', unit: '% of balances a year', transform: [] },
		{ name: 'unemp', column: 'unemp', unit: '%', transform: [] }
	],
	dependent: 'loss',
	longRun: {
		drivers: [{ series: 'unemp', sign: '+', plausible: [0.1, 1], rationale: 'Losses follow unemployment.' }],
		constant: true,
		trend: false
	},
	shortRun: { own: [1], drivers: [{ series: 'unemp', lags: [0], sign: '+' }], constant: false },
	dummies: [],
	fixed: [],
	sample: { from: '2000-Q1', to: '2019-Q4' },
	estimator: { kind: 'two-step' },
	standardErrors: 'ols',
	...changed
});
