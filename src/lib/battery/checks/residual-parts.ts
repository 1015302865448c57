import type { Refusal } from '$lib/econometrics/refusal';
import { ols, type OlsFit } from '$lib/econometrics/regression/ols';
import { periodsPerYear } from '$lib/domain/period';
import type { Verdict } from '$lib/domain/run';
import type { Check, Part } from '$lib/domain/run-result';
import { checkOf, notAssessable, type Context, type Finding } from '../context';
import type { Model } from '../model';
import { notBetterThanQuery, worst } from '../verdict';

/** The regression behind the residuals; given coefficients leave residuals that are projected off the regressors first. */
export const auxiliary = (model: Model): OlsFit | Refusal =>
	model.fit ?? ols(model.residuals, model.design.design);

export const projected = (model: Model) => (model.fit ? {} : { residuals: 'projected off the regressors' });

/** Period of the year count, 4 where a year is one period. */
export const yearly = (context: Context): number => {
	const perYear = periodsPerYear[context.spec.frequency];
	return perYear === 1 ? 4 : perYear;
};

/** With autocorrelated residuals the p-values of tests on them are unreliable: at best a query. */
export const underAutocorrelation = (
	context: Context,
	verdict: Verdict
): { readonly verdict: Verdict; readonly because: readonly string[] } =>
	context.done('residual.autocorrelation')?.verdict === 'fails'
		? { verdict: notBetterThanQuery(verdict), because: ['autocorrelated-residuals'] }
		: { verdict, because: [] };

export const levelNames = ['query', 'fails'];

/** Several orders count as one check: the smallest p-value decides. */
export const worseOf = (
	id: string,
	parts: readonly Part[],
	n: number,
	query: number,
	common: Omit<Finding, 'verdict'>
): Check => {
	const made = parts.filter(({ pValue }) => pValue !== undefined);
	const refused = parts.find(({ reason }) => reason !== undefined);
	if (made.length === 0) return notAssessable(id, refused!.reason!, refused!.detail!, { ...common, parts });
	const decisive = made.reduce((worse, part) => (part.pValue! < worse.pValue! ? part : worse));
	return checkOf(id, {
		...common,
		verdict: worst(made.map(({ verdict }) => verdict!)),
		statistic: decisive.statistic!,
		parameters: { ...common.parameters, ...decisive.parameters },
		pValue: decisive.pValue!,
		rejected: decisive.pValue! < query,
		parts,
		n
	});
};
