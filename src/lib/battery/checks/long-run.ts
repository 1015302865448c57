import { studentTUpperQuantile } from '$lib/econometrics/distributions/student-t';
import { fiellerSet, type FiellerSet } from '$lib/econometrics/error-correction/fieller';
import type { LongRun } from '$lib/econometrics/error-correction/long-run';
import { covarianceAt, indexOf, type Coefficients } from '$lib/econometrics/error-correction/terms';
import { linePath } from '$lib/domain/policy';
import type { Verdict } from '$lib/domain/run';
import type { Part } from '$lib/domain/run-result';
import type { Specification } from '$lib/domain/specification';
import { checkOf, figure, notAssessable, onModel, refusedCheck, tooFew, type Context } from '../context';
import type { Model } from '../model';
import { sources } from '../sources';
import { rangeVerdict, signVerdict, worst } from '../verdict';

type Driver = Specification['longRun']['drivers'][number];

const leastOf = (context: Context, model: Model, id: string) =>
	tooFew(model.coefficients.df, context.settings.number(linePath(id, 'least')), 'degrees of freedom');

/** The model's own slope, with the delta-method error of the one-step form where one is to be had. */
const slopeOf = (model: Model, series: string): { value: number; se: number | null } | undefined => {
	const value = model.relation?.slopes.find((slope) => slope.series === series)?.value;
	if (value === undefined) return undefined;
	const se = model.determined?.slopes.find((slope) => slope.series === series)?.se ?? null;
	return { value, se: figure(se) };
};

const perDriver = (
	id: string,
	context: Context,
	model: Model,
	lines: readonly string[],
	judge: (driver: Driver, slope: { value: number; se: number | null }) => Omit<Part, 'about' | 'statistic'>
) => {
	const rest = { source: sources[id]!, lines };
	const few = leastOf(context, model, id);
	if (few) return refusedCheck(id, few, rest);
	const parts = context.spec.longRun.drivers.flatMap((driver): Part[] => {
		const slope = slopeOf(model, driver.series);
		return slope
			? [
					Object.freeze({
						about: driver.series,
						statistic: { name: 'theta', value: slope.value },
						...judge(driver, slope)
					})
				]
			: [];
	});
	if (parts.length === 0)
		return notAssessable(id, 'domain', 'The speed of adjustment is 0, so there is no long run.', rest);
	return checkOf(id, {
		...rest,
		verdict: worst(parts.map(({ verdict }) => verdict!)),
		parts,
		n: model.residuals.length
	});
};

/** Sign of each long-run slope against the declared one. */
export const longRunSigns = onModel('long-run.signs', sources['long-run.signs']!, (context, model) => {
	const id = 'long-run.signs';
	const within = context.settings.number(linePath(id, 'within-errors'));
	return perDriver(id, context, model, ['least', 'within-errors'], ({ sign }, { value, se }) => ({
		parameters: { declared: sign, ...(se !== null && { se }) },
		verdict: signVerdict(value, se, sign, within)
	}));
});

/** Each long-run slope against its declared range. */
export const longRunRange = onModel('long-run.range', sources['long-run.range']!, (context, model) => {
	const id = 'long-run.range';
	const quantile = studentTUpperQuantile((1 - context.interval) / 2, model.coefficients.df);
	return perDriver(id, context, model, ['least'], ({ plausible }, { value, se }) => {
		const interval = se === null ? null : { low: value - quantile * se, high: value + quantile * se };
		return {
			parameters: {
				low: plausible[0],
				high: plausible[1],
				...(interval && { from: interval.low, to: interval.high })
			},
			verdict: rangeVerdict(value, interval, plausible)
		};
	});
});

const fiellerOf = (levels: Coefficients, series: string, quantile: number): FiellerSet => {
	const y = indexOf(levels, (term) => term.kind === 'own-level');
	const x = indexOf(levels, (term) => term.kind === 'driver-level' && term.series === series);
	return fiellerSet(
		{
			b: levels.values[x]!,
			lambda: -levels.values[y]!,
			varB: covarianceAt(levels, x, x),
			varLambda: covarianceAt(levels, y, y),
			covariance: -covarianceAt(levels, x, y)
		},
		quantile
	);
};

const excludesZero = (set: FiellerSet): boolean => set.shape === 'interval' && (set.low > 0 || set.high < 0);

const precisionPart = (
	slope: LongRun['slopes'][number],
	levels: Coefficients,
	quantile: number,
	useFieller: boolean
): Part => {
	const se = slope.se!;
	const [from, to] = [slope.coef - quantile * se, slope.coef + quantile * se];
	const set = fiellerOf(levels, slope.series, quantile);
	const shown = useFieller ? excludesZero(set) : from > 0 || to < 0;
	const verdict: Verdict = shown ? 'holds' : 'query';
	return Object.freeze({
		about: slope.series,
		statistic: { name: 't', value: figure(slope.t) },
		parameters: {
			theta: slope.coef,
			se,
			from,
			to,
			fieller: set.shape,
			...(set.shape !== 'everything' && { fiellerLow: set.low, fiellerHigh: set.high }),
			judgedBy: useFieller ? 'fieller' : 'delta'
		},
		...(slope.p !== null && { pValue: slope.p }),
		verdict
	});
};

/** Whether the long-run slopes differ from zero: delta-method interval, or Fieller's set where the speed is uncertain. */
export const longRunPrecision = onModel(
	'long-run.precision',
	sources['long-run.precision']!,
	(context, model) => {
		const id = 'long-run.precision';
		const rest = {
			source: sources[id]!,
			nullHypothesis: 'slope-zero',
			lines: ['least', 'fieller-below'],
			levels: ['interval']
		};
		const few = leastOf(context, model, id);
		if (few) return refusedCheck(id, few, rest);
		const levels = model.unrestricted?.coefficients ?? (model.form === 'levels' ? model.coefficients : null);
		const known = model.determined?.slopes.every(({ se }) => figure(se) !== null) ?? false;
		if (!model.determined || !levels || !known)
			return notAssessable(id, 'given', 'The long run was given without a covariance.', rest);
		const y = indexOf(levels, (term) => term.kind === 'own-level');
		const ratio = Math.abs(levels.values[y]!) / Math.sqrt(covarianceAt(levels, y, y));
		const quantile = studentTUpperQuantile((1 - context.interval) / 2, levels.df);
		const useFieller = ratio < context.settings.number(linePath(id, 'fieller-below'));
		const parts = model.determined.slopes.map((slope) => precisionPart(slope, levels, quantile, useFieller));
		const shown = parts.every(({ verdict }) => verdict === 'holds');
		const open = useFieller && parts.some(({ parameters }) => parameters?.['fieller'] !== 'interval');
		return checkOf(id, {
			...rest,
			rejected: shown,
			verdict: shown ? 'holds' : 'query',
			because: open ? ['long-run-not-determined'] : [],
			statistic: { name: 'speed-t', value: figure(ratio) },
			parts,
			n: model.residuals.length
		});
	}
);
