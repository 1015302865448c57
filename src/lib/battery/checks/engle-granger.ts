import {
	bootstrapEngleGranger,
	sieveOrder,
	type BootstrapEngleGranger
} from '$lib/econometrics/cointegration/bootstrap-engle-granger';
import {
	engleGranger,
	type EngleGranger,
	type StaticModel
} from '$lib/econometrics/cointegration/engle-granger';
import { isRefusal, type Refusal } from '$lib/econometrics/refusal';
import type { CriticalValues } from '$lib/econometrics/unit-root/mackinnon';
import { linePath } from '$lib/domain/policy';
import type { CriticalValue, Part } from '$lib/domain/run-result';
import { checkOf, notAssessable, refusedCheck, tooFew, type AnyCheck, type Context } from '../context';
import { residualLagsOf, staticModelOf } from '../relation';
import { sources } from '../sources';
import { criticalAt, doesNotCorrect, goodRejection } from '../verdict';

const id = 'cointegration.engle-granger';

type Scheme = 'iid' | 'wild';
type Bootstraps = Readonly<Record<Scheme, BootstrapEngleGranger>>;

const bootstraps = (context: Context, model: StaticModel, test: EngleGranger): Bootstraps | Refusal => {
	const lags = sieveOrder(test.gap);
	if (isRefusal(lags)) return lags;
	const options = {
		lags,
		replications: context.settings.number(linePath(id, 'draws')),
		seed: context.request.seed
	};
	const iid = bootstrapEngleGranger(model, { ...options, scheme: 'iid' });
	if (isRefusal(iid)) return iid;
	const wild = bootstrapEngleGranger(model, { ...options, scheme: 'wild' });
	return isRefusal(wild) ? wild : { iid, wild };
};

/** Residuals of changing variance need signs drawn rather than residuals. */
const schemeFor = (context: Context): Scheme =>
	['residual.arch', 'residual.heteroskedasticity'].some((other) => {
		const p = context.done(other)?.pValue;
		return p !== undefined && p < context.levels.query;
	})
		? 'wild'
		: 'iid';

const tabulated = (critical: CriticalValues | null): CriticalValue[] =>
	critical ? (['1%', '5%', '10%'] as const).map((level) => ({ level, value: critical[level] })) : [];

const bootstrapPart = (scheme: Scheme, drawn: BootstrapEngleGranger): Part =>
	Object.freeze({
		about: `bootstrap-${scheme}`,
		statistic: { name: 'tau', value: drawn.stat },
		parameters: { lags: drawn.lags, replications: drawn.replications, seed: drawn.seed },
		pValue: drawn.pvalue,
		criticalValues: tabulated(drawn.critical)
	});

/** Engle-Granger: unit root in the residuals of the static relation, by table or, in short samples, by bootstrap. */
export const cointegrationEngleGranger: AnyCheck = (context) => {
	const rest = { source: sources[id]!, nullHypothesis: 'no-cointegration' };
	if (isRefusal(context.sample)) return refusedCheck(id, context.sample, rest);
	if (context.spec.estimator.kind === 'elsewhere')
		return notAssessable(id, 'given', 'The relation was given; this test estimates it afresh.', rest);
	const T = context.sample.sample.T;
	const few = tooFew(T, context.settings.number(linePath(id, 'least')), 'periods');
	if (few) return refusedCheck(id, few, { ...rest, lines: ['least'] });
	const relation = staticModelOf(context.sample);
	const test = engleGranger(relation, residualLagsOf(context, T));
	if (isRefusal(test)) return refusedCheck(id, test, rest);
	const drawn =
		T < context.settings.number(linePath(id, 'bootstrap-below')) || test.critical === null
			? bootstraps(context, relation, test)
			: undefined;
	return judged(context, test, drawn);
};

const judged = (context: Context, test: EngleGranger, drawn: Bootstraps | Refusal | undefined) => {
	const scheme = schemeFor(context);
	const chosen = drawn === undefined || isRefusal(drawn) ? undefined : drawn[scheme];
	const critical = criticalAt(test.critical, context.levels.shown);
	const asymptotic = test.pvalue === null ? undefined : { value: test.pvalue, asymptotic: true };
	const p = chosen ? { value: chosen.pvalue, asymptotic: false } : asymptotic;
	const judgement = goodRejection(
		{
			passes: critical === undefined ? undefined : test.stat < critical,
			...(p && { p }),
			refuted: !isRefusal(context.model) && doesNotCorrect(context.model.adjustment.lambda),
			opposed: context.opposite?.rejects ?? false
		},
		context.levels.shown
	);
	const common = {
		statistic: { name: 'tau', value: test.stat },
		parameters: {
			variables: test.variables,
			deterministic: test.det,
			lags: test.lags,
			rule: test.search?.rule ?? 'given',
			...(chosen && { judgedBy: `bootstrap-${scheme}` })
		},
		...(p && { pValue: p.value }),
		parts: [
			...(chosen && test.pvalue !== null ? [tablePart(test)] : []),
			...(chosen ? bootstrapParts(drawn as Bootstraps) : []),
			...(context.opposite ? [context.opposite.part] : [])
		],
		criticalValues: tabulated(test.critical),
		n: test.nobs,
		nullHypothesis: 'no-cointegration',
		source: sources[id]!,
		lines: ['least', 'rule', 'bootstrap-below', ...(chosen ? ['draws'] : [])],
		levels: ['shown', 'against']
	};
	return judgement
		? checkOf(id, { ...common, ...judgement })
		: notAssessable(id, 'table', 'No critical value exists for this relation.', common);
};

const bootstrapParts = ({ iid, wild }: Bootstraps): Part[] => [
	bootstrapPart('iid', iid),
	bootstrapPart('wild', wild)
];

const tablePart = (test: EngleGranger): Part =>
	Object.freeze({
		about: 'table',
		statistic: { name: 'tau', value: test.stat },
		pValue: test.pvalue!,
		criticalValues: tabulated(test.critical),
		n: test.nobs
	});
