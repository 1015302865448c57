import { bootstrapEcm, type BootstrapEcm } from '$lib/econometrics/cointegration/bootstrap-ecm';
import { ecmT, readTBounds, type EcmT } from '$lib/econometrics/cointegration/ecm-t';
import { longRunDummies } from '$lib/econometrics/error-correction/equation';
import type { ErrorCorrectionFit } from '$lib/econometrics/error-correction/fit';
import { isRefusal, refuse, type Refusal } from '$lib/econometrics/refusal';
import { linePath } from '$lib/domain/policy';
import type { Check, CriticalValue } from '$lib/domain/run-result';
import { checkOf, onModel, refusedCheck, tooFew, type Context, type Finding } from '../context';
import type { Model } from '../model';
import { sources } from '../sources';
import { criticalAt, doesNotCorrect, goodRejection } from '../verdict';

const id = 'cointegration.ecm-t';

/** The one-step form with all levels free, or why there is none. */
export const freeLevelsOf = (model: Model): ErrorCorrectionFit | Refusal => {
	if (model.spec.estimator.kind === 'elsewhere')
		return refuse('given', 'The coefficients were given; this test needs the levels estimated here.');
	const { unrestricted } = model;
	if (!unrestricted)
		return refuse('rank', 'The equation with free levels cannot be estimated on this sample.');
	const fixed = unrestricted.equation.fixed.find(
		({ term }) => !term.startsWith('d.') && term.endsWith('.l1')
	);
	if (fixed) return refuse('given', `The coefficient of ${fixed.term} is imposed; this test needs it free.`);
	return unrestricted;
};

/** Short-run terms and dummies beyond the change at lag 0 of each long-run driver, which the surface has built in. */
const extraTerms = ({ coefficients, equation }: ErrorCorrectionFit): number =>
	coefficients.terms.filter(
		(term) =>
			term.kind === 'dummy' ||
			term.kind === 'level-dummy' ||
			term.kind === 'own-change' ||
			(term.kind === 'driver-change' && !(term.lag === 0 && equation.longRun.drivers.includes(term.series)))
	).length;

const hasStep = ({ equation }: ErrorCorrectionFit): boolean =>
	longRunDummies(equation).some(({ kind }) => kind === 'step');

interface Evidence {
	readonly table: EcmT | Refusal;
	readonly drawn: BootstrapEcm | Refusal | undefined;
}

const evidenceOf = (context: Context, model: Model, fit: ErrorCorrectionFit, stat: number): Evidence => {
	const { equation } = fit;
	const table =
		!equation.longRun.constant && !equation.shortRun.constant
			? refuse('table', 'No table exists for an equation without a constant.')
			: hasStep(fit)
				? refuse('table', 'A step in the long run takes the test out of reach of the tables.')
				: ecmT(stat, {
						det: equation.longRun.trend ? 'ct' : 'c',
						drivers: equation.longRun.drivers.length,
						nobs: fit.fit.nobs,
						extraTerms: extraTerms(fit)
					});
	const short = fit.fit.nobs < context.settings.number(linePath(id, 'bootstrap-below'));
	const draw = short || isRefusal(table) || (table.critical === null && table.bounds === null);
	return {
		table,
		drawn: draw
			? bootstrapEcm(equation, model.data.sample, {
					replications: context.settings.number(linePath(id, 'draws')),
					seed: context.request.seed
				})
			: undefined
	};
};

const criticalValuesOf = ({ table }: Evidence): CriticalValue[] =>
	isRefusal(table) || !table.critical
		? []
		: (['1%', '5%', '10%'] as const).map((level) => ({ level, value: table.critical![level] }));

/** Asymptotic bounds at a level: the ends if the drivers were all I(0), or all I(1). */
const boundsOf = (table: EcmT | Refusal, level: number): readonly [number, number] | undefined =>
	isRefusal(table) || !table.bounds
		? undefined
		: (table.bounds as Readonly<Record<string, readonly [number, number]>>)[
				`${Number((100 * level).toPrecision(6))}%`
			];

const judged = (context: Context, fit: ErrorCorrectionFit, stat: number, evidence: Evidence): Check => {
	const { table, drawn } = evidence;
	const level = context.levels.shown;
	const bounds = boundsOf(table, level);
	const critical = (isRefusal(table) ? undefined : criticalAt(table.critical, level)) ?? bounds?.[1];
	const p = drawn && !isRefusal(drawn) ? drawn.t.pvalue : undefined;
	const judgement = goodRejection(
		{
			passes: critical === undefined ? undefined : stat < critical,
			...(p !== undefined && { p: { value: p, asymptotic: false } }),
			refuted: doesNotCorrect(fit.adjustment.lambda),
			opposed: context.opposite?.rejects ?? false
		},
		level
	);
	const between = bounds && readTBounds(stat, bounds) === 'inconclusive';
	const common: Omit<Finding, 'verdict'> = {
		statistic: { name: 't', value: stat },
		parameters: {
			drivers: fit.equation.longRun.drivers.length,
			deterministic: fit.equation.longRun.trend ? 'ct' : 'c',
			...(!isRefusal(table) && { effectiveRows: table.effectiveRows }),
			...(bounds && { boundI0: bounds[0], boundI1: bounds[1] }),
			...(p !== undefined && { judgedBy: 'bootstrap', replications: (drawn as BootstrapEcm).replications })
		},
		...(p !== undefined && { pValue: p }),
		criticalValues: criticalValuesOf(evidence),
		...(context.opposite && { parts: [context.opposite.part] }),
		n: fit.fit.nobs,
		nullHypothesis: 'no-adjustment',
		source: sources[id]!,
		lines: ['least', 'bootstrap-below', ...(drawn ? ['draws'] : [])],
		levels: ['shown', 'against']
	};
	if (!judgement)
		return refusedCheck(id, isRefusal(table) ? table : refuse('table', 'No critical value exists.'), common);
	const inconclusive = judgement.verdict === 'query' && between ? ['between-bounds'] : [];
	return checkOf(id, {
		...common,
		...judgement,
		because: [...judgement.because, ...inconclusive]
	});
};

/** t-ratio of the lagged level in the equation with free levels: no level relation under the null. */
export const cointegrationEcmT = onModel(id, sources[id]!, (context, model) => {
	const rest = { source: sources[id]!, nullHypothesis: 'no-adjustment', lines: ['least'] };
	const fit = freeLevelsOf(model);
	if (isRefusal(fit)) return refusedCheck(id, fit, rest);
	const few = tooFew(
		fit.fit.nobs - fit.fit.k,
		context.settings.number(linePath(id, 'least')),
		'degrees of freedom'
	);
	if (few) return refusedCheck(id, few, rest);
	// The test is about the least-squares t-ratio, whatever errors the model reports.
	const at = fit.fit.names.indexOf('y.l1');
	const stat = fit.fit.t[at]!;
	return judged(context, fit, stat, evidenceOf(context, model, fit, stat));
});
