import { isRefusal, refuse, type Refusal } from '../refusal';
import { ols, type OlsFit } from '../regression/ols';
import { constant, trend } from '../series/deterministic';
import { designOf, type Regressor } from '../series/design';
import { longRunDummies, type Equation, type Relation, type Sample } from './equation';

/**
 * Regression of the dependent variable on the long-run terms in levels. Under cointegration its coefficients
 * converge fast; its t-ratios are not t-distributed. Engle & Granger (1987) Econometrica 55, 251-276.
 */
export function staticRegression(equation: Equation, sample: Sample): OlsFit | Refusal {
	const y = sample.series.get(equation.dependent);
	if (y === undefined) return refuse('domain', `the sample has no series ${equation.dependent}`);
	const regressors = longRunRegressors(equation, sample);
	return isRefusal(regressors) ? regressors : ols(y, designOf(regressors));
}

/** Constant, trend, drivers and dummies of the long run, one row a period. */
export function longRunRegressors(equation: Equation, sample: Sample): readonly Regressor[] | Refusal {
	const regressors: Regressor[] = [];
	if (equation.longRun.constant) regressors.push(constant(sample.T));
	if (equation.longRun.trend) regressors.push(trend(1, sample.T));
	for (const series of equation.longRun.drivers) {
		const column = sample.series.get(series);
		if (column === undefined) return refuse('domain', `the sample has no series ${series}`);
		regressors.push({ name: series, column });
	}
	for (const { name, values } of longRunDummies(equation)) regressors.push({ name, column: values });
	return regressors;
}

/** The relation a static regression estimated. Its columns stand in the order of longRunRegressors. */
export function staticRelation(equation: Equation, fit: OlsFit): Relation {
	let at = 0;
	const next = () => fit.coef[at++]!;
	return Object.freeze({
		constant: equation.longRun.constant ? next() : 0,
		trend: equation.longRun.trend ? next() : 0,
		slopes: equation.longRun.drivers.map((series) => Object.freeze({ series, value: next() })),
		dummies: longRunDummies(equation).map(({ name }) => Object.freeze({ name, value: next() }))
	});
}
