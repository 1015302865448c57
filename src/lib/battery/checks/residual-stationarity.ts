import {
	residualStationarity,
	type GapOrigin,
	type ResidualStationarity
} from '$lib/econometrics/cointegration/residual-stationarity';
import { staticDeterministic } from '$lib/econometrics/error-correction/companions';
import { longRunDummies, type Relation } from '$lib/econometrics/error-correction/equation';
import { gapFrom } from '$lib/econometrics/error-correction/gap';
import { staticRegression } from '$lib/econometrics/error-correction/static-regression';
import { isRefusal, type Refusal } from '$lib/econometrics/refusal';
import { periodIndex } from '$lib/domain/period';
import { linePath } from '$lib/domain/policy';
import type { Check, Part } from '$lib/domain/run-result';
import {
	checkOf,
	notAssessable,
	onModel,
	refusedCheck,
	refusedPart,
	tooFew,
	type AnyCheck,
	type Context,
	type Finding
} from '../context';
import type { Model } from '../model';
import { residualLagsOf } from '../relation';
import type { ModelSample } from '../sample';
import { sources } from '../sources';
import { criticalAt, doesNotCorrect, goodRejection } from '../verdict';

const evidence = (test: ResidualStationarity) => ({
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

const judged = (
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

/** Unit root in the gap of the relation estimated on this very sample. */
export const stationarityRefit: AnyCheck = (context) => {
	const id = 'residual.stationarity-refit';
	const rest = {
		source: sources[id]!,
		nullHypothesis: 'unit-root-in-gap',
		lines: ['least'],
		levels: ['shown']
	};
	if (isRefusal(context.sample)) return refusedCheck(id, context.sample, rest);
	if (context.spec.estimator.kind === 'elsewhere')
		return notAssessable(id, 'given', 'The relation was given; this test estimates it afresh.', rest);
	const { equation, sample } = context.sample;
	const drivers = equation.longRun.drivers.length;
	// The tables are for least-squares residuals of the levels, so that is the gap tested, whatever the estimator.
	const fit = staticRegression(equation, sample);
	if (isRefusal(fit)) return refusedCheck(id, fit, rest);
	const origin: GapOrigin = {
		coefficients: 'estimated-here',
		det: staticDeterministic(equation),
		drivers,
		step: longRunDummies(equation).some(({ kind }) => kind === 'step')
	};
	const test = residualStationarity(fit.resid, origin, residualLagsOf(context, sample.T));
	if (isRefusal(test)) return refusedCheck(id, test, rest);
	const least = Math.max(context.settings.number(linePath(id, 'least')), 10 + 2 * test.lags + 5 * drivers);
	const few = tooFew(sample.T, least, 'periods');
	if (few) return refusedCheck(id, few, rest);
	return judged(id, context, test, false, rest);
};

interface Held {
	readonly relation: Relation;
	/** First element of the sample after the one the values were estimated on. */
	readonly newFrom: number;
}

/** Values held fixed: imposed by the specification, given from elsewhere, or those of an approved version. */
const heldIn = (context: Context, model: Model): Held | undefined => {
	const { held } = context.request;
	if (held) {
		const first = periodIndex(model.data.periods[0]!, context.spec.frequency)!;
		const through = periodIndex(held.through, context.spec.frequency);
		const relation: Relation = {
			constant: held.constant,
			trend: held.trend ?? 0,
			slopes: held.slopes,
			dummies: []
		};
		return { relation, newFrom: through === undefined ? 0 : Math.max(0, through + 1 - first) };
	}
	const known = context.spec.estimator.kind === 'imposed' || context.spec.estimator.kind === 'elsewhere';
	return known && model.relation ? { relation: model.relation, newFrom: 0 } : undefined;
};

const heldTest = (
	context: Context,
	gap: Float64Array,
	drivers: number,
	overlap: boolean
): ResidualStationarity | Refusal =>
	residualStationarity(gap, { coefficients: 'held', overlap, drivers }, residualLagsOf(context, gap.length));

/** The conservative reading over the whole window, which includes the old sample. */
const overlapPart = (context: Context, gap: Float64Array, drivers: number): Part => {
	const test = heldTest(context, gap, drivers, true);
	return isRefusal(test)
		? refusedPart('whole window', test)
		: Object.freeze({ about: 'whole window', ...evidence(test) });
};

const gapOf = ({ equation, sample }: ModelSample, relation: Relation): Float64Array =>
	gapFrom(relation, equation, sample);

/** Unit root in the gap of values held fixed, on the data after those they were estimated on. */
export const stationarityHeld = onModel(
	'residual.stationarity-held',
	sources['residual.stationarity-held']!,
	(context, model) => {
		const id = 'residual.stationarity-held';
		const rest = {
			source: sources[id]!,
			nullHypothesis: 'unit-root-in-gap',
			lines: ['least-new', 'against'],
			levels: ['shown']
		};
		const held = heldIn(context, model);
		if (!held)
			return notAssessable(
				id,
				'no-approved-version',
				'There is no approved version whose values could be held.',
				rest
			);
		const gap = gapOf(model.data, held.relation);
		const drivers = held.relation.slopes.length;
		const fresh = gap.slice(held.newFrom);
		const parts = held.newFrom > 0 ? [overlapPart(context, gap, drivers)] : [];
		const common = { ...rest, ...(parts.length > 0 && { parts }) };
		const few = tooFew(fresh.length, context.settings.number(linePath(id, 'least-new')), 'new periods');
		if (few) return refusedCheck(id, few, common);
		const test = heldTest(context, fresh, drivers, false);
		if (isRefusal(test)) return refusedCheck(id, test, common);
		const strict = criticalAt(test.kpss?.critical ?? null, context.settings.number(linePath(id, 'against')));
		const opposed = test.kpss !== null && strict !== undefined && test.kpss.stat > strict;
		const kpss: Part[] = test.kpss
			? [
					Object.freeze({
						about: 'KPSS',
						statistic: { name: 'eta', value: test.kpss.stat },
						parameters: { lag: test.kpss.lag },
						n: test.kpss.nobs
					})
				]
			: [];
		return judged(id, context, test, opposed, { ...common, parts: [...parts, ...kpss] });
	}
);
