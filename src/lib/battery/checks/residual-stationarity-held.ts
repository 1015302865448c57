import {
	residualStationarity,
	type ResidualStationarity
} from '$lib/econometrics/cointegration/residual-stationarity';
import { gapBoundary } from '$lib/econometrics/cointegration/gap-boundary';
import type { Relation } from '$lib/econometrics/error-correction/equation';
import { gapFrom } from '$lib/econometrics/error-correction/gap';
import { isRefusal, type Refusal } from '$lib/econometrics/refusal';
import { periodIndex, periodsPerYear } from '$lib/domain/period';
import { linePath } from '$lib/domain/policy';
import type { Check, Part } from '$lib/domain/run-result';
import {
	checkOf,
	figure,
	notAssessable,
	onModel,
	refusedCheck,
	refusedPart,
	tooFew,
	type Context,
	type Finding
} from '../context';
import type { Model } from '../model';
import { residualLagsOf } from '../relation';
import type { ModelSample } from '../sample';
import { sources } from '../sources';
import { criticalAt } from '../verdict';

import { evidence, judged } from './gap-test';
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

/** What the new periods say: the test of the gap's KPSS and the boundary of its cumulated deviations. */
interface Watch {
	readonly parts: readonly Part[];
	readonly crossedAt5: boolean;
	readonly crossedAt1: boolean;
}

const nothingWatched: Watch = { parts: [], crossedAt5: false, crossedAt1: false };

/** The cumulated gap after approval against a boundary that may be looked at every period. */
const watched = (context: Context, gap: Float64Array, newFrom: number): Watch => {
	const fresh = gap.length - newFrom;
	if (newFrom === 0 || fresh < context.settings.number(linePath(held, 'least-boundary')))
		return nothingWatched;
	const scale = 2 * periodsPerYear[context.spec.frequency];
	const found = gapBoundary(gap, { known: newFrom, scale, levels: [0.05, 0.01] });
	if (isRefusal(found)) return { ...nothingWatched, parts: [refusedPart('boundary', found)] };
	const [five, one] = found.lines;
	return {
		parts: [
			Object.freeze({
				about: 'boundary',
				statistic: { name: 'B', value: figure(found.path.at(-1)) },
				parameters: {
					known: newFrom,
					scale,
					crossedAt5: five!.crossed !== null,
					crossedAt1: one!.crossed !== null
				},
				criticalValues: [
					{ level: '5%', value: five!.boundary.at(-1)! },
					{ level: '1%', value: one!.boundary.at(-1)! }
				],
				n: fresh
			})
		],
		crossedAt5: five!.crossed !== null,
		crossedAt1: one!.crossed !== null
	};
};

const kpssPart = ({ kpss }: ResidualStationarity): Part[] =>
	kpss
		? [
				Object.freeze({
					about: 'KPSS',
					statistic: { name: 'eta', value: kpss.stat },
					parameters: { lag: kpss.lag },
					n: kpss.nobs
				})
			]
		: [];

const held = 'residual.stationarity-held';

/** Fewer new periods than the test needs: only the boundary can speak. */
const onlyWatched = (few: Refusal, watch: Watch, common: Omit<Finding, 'verdict'>): Check =>
	watch.crossedAt5
		? checkOf(held, {
				...common,
				verdict: watch.crossedAt1 ? 'fails' : 'query',
				because: ['boundary-crossed']
			})
		: refusedCheck(held, few, common);

/** Unit root in the gap of values held fixed, on the data after those they were estimated on. */
export const stationarityHeld = onModel(held, sources[held]!, (context, model) => {
	const rest = {
		source: sources[held]!,
		nullHypothesis: 'unit-root-in-gap',
		lines: ['least-new', 'least-boundary'],
		levels: ['shown', 'against']
	};
	const values = heldIn(context, model);
	if (!values)
		return notAssessable(
			held,
			'no-approved-version',
			'There is no approved version whose values could be held.',
			rest
		);
	const gap = gapOf(model.data, values.relation);
	const drivers = values.relation.slopes.length;
	const fresh = gap.slice(values.newFrom);
	const watch = watched(context, gap, values.newFrom);
	const parts = [...(values.newFrom > 0 ? [overlapPart(context, gap, drivers)] : []), ...watch.parts];
	const common = { ...rest, parts };
	const few = tooFew(fresh.length, context.settings.number(linePath(held, 'least-new')), 'new periods');
	if (few) return onlyWatched(few, watch, common);
	const test = heldTest(context, fresh, drivers, false);
	if (isRefusal(test)) return refusedCheck(held, test, common);
	const strict = criticalAt(test.kpss?.critical ?? null, context.settings.number('levels/against'));
	const opposed = test.kpss !== null && strict !== undefined && test.kpss.stat > strict;
	const check = judged(held, context, test, opposed, { ...common, parts: [...parts, ...kpssPart(test)] });
	return watch.crossedAt1
		? Object.freeze({ ...check, verdict: 'fails', because: [...(check.because ?? []), 'boundary-crossed'] })
		: check;
});
