import { studentTCdf } from '$lib/econometrics/distributions/student-t';
import { halfLife } from '$lib/econometrics/error-correction/half-life';
import { isRefusal } from '$lib/econometrics/refusal';
import { mackinnonCritical } from '$lib/econometrics/unit-root/mackinnon';
import { periodsPerYear } from '$lib/domain/period';
import { linePath } from '$lib/domain/policy';
import { checkOf, notAssessable, onModel, refusedCheck, tooFew, type Context } from '../context';
import { hacCovariance, hacLag, overlapOf } from '../covariance';
import { primaryOf } from '../groups';
import type { Model } from '../model';
import { sources } from '../sources';
import { adjustmentVerdict, criticalAt, doesNotCorrect, goodRejection } from '../verdict';

const leastOf = (context: Context, model: Model, id: string) =>
	tooFew(model.coefficients.df, context.settings.number(linePath(id, 'least')), 'degrees of freedom');

/** The speed of adjustment lies between 0 and 1; up to 2 it overshoots. */
export const adjustmentSign = onModel('adjustment.sign', sources['adjustment.sign']!, (context, model) => {
	const id = 'adjustment.sign';
	const { lambda } = model.adjustment;
	const common = {
		statistic: { name: 'lambda', value: lambda },
		parameters: { coefficientOnGap: -lambda },
		n: model.residuals.length,
		source: sources[id]!,
		lines: ['least', 'holds-below', 'fails-from']
	};
	const few = leastOf(context, model, id);
	if (few) return refusedCheck(id, few, common);
	const [holdsBelow, failsFrom] = [linePath(id, 'holds-below'), linePath(id, 'fails-from')];
	return checkOf(id, {
		...common,
		verdict: adjustmentVerdict(
			lambda,
			context.settings.number(holdsBelow),
			context.settings.number(failsFrom)
		)
	});
});

/** t-ratio of the term that corrects, with HAC errors. */
const hacT = (model: Model): { t: number; lag: number } | undefined => {
	if (!model.fit) return undefined;
	const at = model.fit.names.indexOf(model.form === 'levels' ? 'y.l1' : 'ec.l1');
	if (at < 0) return undefined;
	const lag = hacLag(model.fit.nobs, overlapOf(model.spec));
	const covariance = hacCovariance(model.fit, lag);
	if (!covariance) return undefined;
	return { t: model.fit.coef[at]! / Math.sqrt(covariance[at * model.fit.k + at]!), lag };
};

/** Significance of the speed: a t test once the relation is shown; with an imposed relation Dickey-Fuller values. */
export const adjustmentSignificance = onModel(
	'adjustment.significance',
	sources['adjustment.significance']!,
	(context, model) => {
		const id = 'adjustment.significance';
		const rest = { source: sources[id]!, nullHypothesis: 'speed-zero', lines: ['least'], levels: ['shown'] };
		const few = leastOf(context, model, id);
		if (few) return refusedCheck(id, few, rest);
		if (!model.fit)
			return notAssessable(id, 'given', 'The coefficients were given without an estimate here.', rest);
		const hac = hacT(model);
		if (!hac) return notAssessable(id, 'given', 'The speed of adjustment is imposed.', rest);
		const n = model.fit.nobs;
		const df = model.coefficients.df;
		const refuted = doesNotCorrect(model.adjustment.lambda);
		const common = {
			...rest,
			statistic: { name: 't', value: hac.t },
			parameters: { errors: 'hac', lag: hac.lag, side: 'lambda > 0' },
			n
		};
		if (context.spec.estimator.kind === 'imposed') {
			const critical = mackinnonCritical('c', 1, n)!;
			const at = criticalAt(critical, context.levels.shown);
			const judged = goodRejection(
				{ passes: at === undefined ? undefined : hac.t < at, refuted },
				context.levels.shown
			);
			const criticalValues = (['1%', '5%', '10%'] as const).map((level) => ({
				level,
				value: critical[level]
			}));
			return judged
				? checkOf(id, { ...common, ...judged, criticalValues })
				: notAssessable(id, 'table', 'The tables lack the level of the policy.', common);
		}
		const shown = context.done(primaryOf(context, 'cointegration') ?? '');
		if (shown?.verdict !== 'holds')
			return notAssessable(
				id,
				'needs-cointegration',
				'The t-ratio is readable only once cointegration is shown, and it is not.',
				common
			);
		const p = studentTCdf(hac.t, df);
		const judged = goodRejection({ passes: p < context.levels.shown, refuted }, context.levels.shown)!;
		return checkOf(id, { ...common, ...judged, pValue: p });
	}
);

/** Half-life of a gap inside the range of the policy, in quarters. */
export const adjustmentHalfLife = onModel(
	'adjustment.half-life',
	sources['adjustment.half-life']!,
	(context, model) => {
		const id = 'adjustment.half-life';
		const rest = { source: sources[id]!, lines: ['least', 'shortest', 'longest'], levels: ['interval'] };
		const few = leastOf(context, model, id);
		if (few) return refusedCheck(id, few, rest);
		const found = halfLife(model.coefficients, context.interval);
		if (isRefusal(found)) return refusedCheck(id, found, rest);
		const perQuarter = periodsPerYear[context.spec.frequency] / 4;
		const quarters = found.periods / perQuarter;
		const shortest = context.settings.number(linePath(id, 'shortest'));
		const longest = context.settings.number(linePath(id, 'longest'));
		const { interval } = found;
		return checkOf(id, {
			...rest,
			verdict: quarters >= shortest && quarters <= longest ? 'holds' : 'query',
			because: quarters < shortest ? ['too-fast'] : quarters > longest ? ['too-slow'] : [],
			statistic: { name: 'half-life', value: found.periods },
			parameters: {
				quarters,
				coverage: context.interval,
				...(interval && { low: interval.low }),
				...(interval && (interval.high === null ? { openEnd: true } : { high: interval.high }))
			},
			n: model.residuals.length
		});
	}
);
