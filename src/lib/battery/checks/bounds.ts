import { boundsTest, readFBounds, type BoundsTest } from '$lib/econometrics/cointegration/bounds';
import { readTBounds, type BoundsReading } from '$lib/econometrics/cointegration/ecm-t';
import { longRunDummies } from '$lib/econometrics/error-correction/equation';
import { isRefusal } from '$lib/econometrics/refusal';
import { linePath } from '$lib/domain/policy';
import type { Part } from '$lib/domain/run-result';
import { checkOf, notAssessable, onModel, refusedCheck, tooFew, type Context } from '../context';
import { sources } from '../sources';
import { doesNotCorrect, goodRejection } from '../verdict';
import { freeLevelsOf } from './ecm-t';

const id = 'cointegration.bounds';

type Bound = readonly [number, number];

/** Orders of integration that the joint reading established for the drivers. */
const driverOrders = (context: Context): readonly string[] => {
	const parts = context.done('integration.order')?.parts ?? [];
	return context.spec.longRun.drivers.map(({ series }) =>
		String(parts.find(({ about }) => about === series)?.parameters?.['order'] ?? 'unread')
	);
};

const anyTwo = (context: Context): boolean =>
	(context.done('integration.order')?.parts ?? []).some(({ parameters }) => parameters?.['order'] === 'I(2)');

/** Both ends where the drivers' orders are open, one end where all are established alike. */
const narrowed = (context: Context, [i0, i1]: Bound): Bound => {
	const orders = driverOrders(context);
	if (orders.every((order) => order === 'I(1)')) return [i1, i1];
	return orders.every((order) => order === 'I(0)') ? [i0, i0] : [i0, i1];
};

const part = (about: 'F' | 't', stat: number, bound: Bound, reading: BoundsReading, level: string): Part =>
	Object.freeze({
		about,
		statistic: { name: about, value: stat },
		parameters: { level, boundI0: bound[0], boundI1: bound[1], reading },
		verdict: reading === 'rejected' ? 'holds' : 'query'
	});

const partsOf = (context: Context, test: BoundsTest, level: string): Part[] | undefined => {
	const f = test.FBounds?.levels[level as '5%'];
	if (!f) return undefined;
	const t = test.tBounds?.[level as '5%'];
	return [
		part('F', test.F, f, readFBounds(test.F, narrowed(context, f)), level),
		...(t && test.t !== null ? [part('t', test.t, t, readTBounds(test.t, narrowed(context, t)), level)] : [])
	];
};

/** Bounds test of a level relation: F of the levels and t of the lagged dependent variable, both against their bounds. */
export const cointegrationBounds = onModel(id, sources[id]!, (context, model) => {
	const rest = { source: sources[id]!, nullHypothesis: 'no-level-relation', lines: ['least'] };
	const fit = freeLevelsOf(model);
	if (isRefusal(fit)) return refusedCheck(id, fit, rest);
	const few = tooFew(
		fit.fit.nobs - fit.fit.k,
		context.settings.number(linePath(id, 'least')),
		'degrees of freedom'
	);
	if (few) return refusedCheck(id, few, rest);
	if (anyTwo(context))
		return notAssessable(id, 'table', 'The bounds hold only where no series is I(2), and one is.', rest);
	if (longRunDummies(fit.equation).some(({ kind }) => kind === 'step'))
		return notAssessable(
			id,
			'table',
			'A step in the long run takes the test out of reach of the tables.',
			rest
		);
	const test = boundsTest(fit.equation, model.data.sample, fit.equation.longRun.trend ? 5 : 3);
	if (isRefusal(test)) return refusedCheck(id, test, rest);
	const level = `${Number((100 * context.levels.shown).toPrecision(6))}%`;
	const parts = partsOf(context, test, level);
	const common = {
		...rest,
		levels: ['shown', 'against'],
		statistic: { name: 'F', value: test.F },
		parameters: {
			case: test.case,
			drivers: test.drivers,
			df1: test.df1,
			df2: test.df2,
			...(test.FBounds && { table: test.FBounds.source }),
			...(test.FBounds?.observations && { tableRows: test.FBounds.observations }),
			...(test.FP && { pIfI0: test.FP.I0, pIfI1: test.FP.I1 })
		},
		n: test.nobs
	};
	if (!parts)
		return notAssessable(
			id,
			'table',
			`No bounds exist for ${test.nobs} rows and ${test.drivers} drivers.`,
			common
		);
	const inconclusive = parts.some(({ parameters }) => parameters?.['reading'] === 'inconclusive');
	const judgement = goodRejection(
		{
			passes: parts.every(({ verdict }) => verdict === 'holds'),
			refuted: doesNotCorrect(fit.adjustment.lambda),
			opposed: context.opposite?.rejects ?? false
		},
		context.levels.shown
	)!;
	const other = context.done('cointegration.engle-granger')?.rejected;
	const disagrees = other !== undefined && other !== judgement.rejected;
	return checkOf(id, {
		...common,
		...judgement,
		parts,
		because: [
			...(disagrees ? ['engle-granger-disagrees'] : []),
			...judgement.because,
			...(inconclusive && !judgement.rejected ? ['between-bounds'] : [])
		]
	});
});
