import type { ResidualStationarity } from '$lib/econometrics/cointegration/residual-stationarity';
import { isRefusal } from '$lib/econometrics/refusal';
import type { Check } from '$lib/domain/run-result';
import { checkOf, notAssessable, type Context, type Finding } from '../context';
import { criticalAt, doesNotCorrect, goodRejection } from '../verdict';

/** What a test of the gap shows. */
export const evidence = (test: ResidualStationarity) => ({
	statistic: { name: 'tau', value: test.stat },
	parameters: {
		coefficients: test.origin.coefficients,
		...(test.origin.coefficients === 'held' && { overlap: test.origin.overlap }),
		deterministic: test.regressionDet,
		tableDeterministic: test.table.det,
		tableVariables: test.table.variables,
		tableObservations: test.table.observations,
		lags: test.lags,
		rule: test.search?.rule ?? 'given'
	},
	...(test.pvalue !== null && { pValue: test.pvalue }),
	...(test.critical && {
		criticalValues: (['1%', '5%', '10%'] as const).map((level) => ({ level, value: test.critical![level] }))
	}),
	n: test.nobs
});

const lambdaOf = (context: Context): number | undefined =>
	isRefusal(context.model) ? undefined : context.model.adjustment.lambda;

/** The verdict of a test of the gap. */
export const judged = (
	id: string,
	context: Context,
	test: ResidualStationarity,
	opposed: boolean,
	rest: Omit<Finding, 'verdict'>
): Check => {
	const critical = criticalAt(test.critical, context.levels.shown);
	const lambda = lambdaOf(context);
	const judgement = goodRejection(
		{
			passes: critical === undefined ? undefined : test.stat < critical,
			...(test.pvalue !== null && { p: { value: test.pvalue, asymptotic: true } }),
			refuted: lambda !== undefined && doesNotCorrect(lambda),
			opposed
		},
		context.levels.shown
	);
	const common = { ...rest, ...evidence(test) };
	return judgement
		? checkOf(id, { ...common, ...judgement })
		: notAssessable(
				id,
				'table',
				'No critical value exists for a relation with a step or without a constant.',
				common
			);
};
