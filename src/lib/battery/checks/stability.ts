import { equationDesign } from '$lib/econometrics/error-correction/design';
import type { Equation } from '$lib/econometrics/error-correction/equation';
import { isRefusal, refuse, type Refusal } from '$lib/econometrics/refusal';
import { ols, type OlsFit } from '$lib/econometrics/regression/ols';
import { CUSUM_BOUNDARY, cusum } from '$lib/econometrics/stability/cusum';
import {
	CUSUMSQ_LEVELS,
	cusumOfSquares,
	type CusumOfSquares
} from '$lib/econometrics/stability/cusum-of-squares';
import { hansenP } from '$lib/econometrics/stability/hansen-p';
import { supF, type SupF } from '$lib/econometrics/stability/sup-f';
import { linePath } from '$lib/domain/policy';
import type { Verdict } from '$lib/domain/run';
import type { Check } from '$lib/domain/run-result';
import { checkOf, notAssessable, onModel, refusedCheck, tooFew, type Context } from '../context';
import type { Model } from '../model';
import { sources } from '../sources';
import { badRejection, notWorseThanQuery } from '../verdict';
import { underAutocorrelation } from './residual-parts';

const noFit = 'The coefficients were given; this check follows estimates over the sample.';

/** Period of a row (1-based) of the equation. */
export const periodOfRow = (model: Model, row: number): string =>
	model.data.periods[model.design.firstPeriod + row - 2]!;

const leastOf = (context: Context, fit: OlsFit, id: string) =>
	tooFew(fit.nobs - fit.k, context.settings.number(linePath(id, 'least')), 'degrees of freedom');

/** CUSUM of recursive residuals against its boundary. */
export const stabilityCusum = onModel('stability.cusum', sources['stability.cusum']!, (context, model) => {
	const id = 'stability.cusum';
	const common = {
		source: sources[id]!,
		nullHypothesis: 'constant-coefficients',
		lines: ['least'],
		levels: ['query', 'fails']
	};
	if (!model.fit) return notAssessable(id, 'given', noFit, common);
	const test = leastOf(context, model.fit, id) ?? cusum(model.fit);
	if (isRefusal(test)) return refusedCheck(id, test, common);
	const periods = Array.from(test.path, (_, j) => periodOfRow(model, test.first + j));
	return checkOf(id, {
		...common,
		verdict: badRejection(test.p, context.levels),
		statistic: { name: 'S', value: test.stat },
		parameters: { recursiveResiduals: test.path.length, crossesAt5: test.crosses5 },
		pValue: test.p,
		rejected: test.p < context.levels.query,
		criticalValues: (['10%', '5%', '1%'] as const).map((level) => ({ level, value: CUSUM_BOUNDARY[level] })),
		n: model.fit.nobs,
		plot: Object.freeze({
			kind: 'cusum' as const,
			periods,
			path: Array.from(test.path),
			bound: Array.from(test.bound, (value) => CUSUM_BOUNDARY['5%'] * value)
		})
	});
});

/** The bracket of tabulated levels decides: no exact p-value is published. */
const ofBracket = (context: Context, test: CusumOfSquares): Verdict => {
	const beyond = (level: number): boolean => {
		const at = CUSUMSQ_LEVELS.findIndex((each) => each === level);
		return at >= 0 && test.maxDeviation > test.critical[at]!;
	};
	if (beyond(context.levels.fails)) return 'fails';
	return beyond(context.levels.query) ? 'query' : 'holds';
};

const bracketText = ([low, high]: readonly [number, number]): string =>
	high === 1 ? `> ${low}` : low === 0 ? `< ${high}` : `${low} to ${high}`;

/** CUSUM of squares against its band; a query at most where the CUSUM itself holds. */
export const stabilityCusumsq = onModel(
	'stability.cusumsq',
	sources['stability.cusumsq']!,
	(context, model) => {
		const id = 'stability.cusumsq';
		const common = {
			source: sources[id]!,
			nullHypothesis: 'constant-variance',
			lines: ['least'],
			levels: ['query', 'fails']
		};
		if (!model.fit) return notAssessable(id, 'given', noFit, common);
		const test = leastOf(context, model.fit, id) ?? cusumOfSquares(model.fit);
		if (isRefusal(test)) return refusedCheck(id, test, common);
		const n = test.path.length;
		const plain = ofBracket(context, test);
		const softened = plain === 'fails' && context.done('stability.cusum')?.verdict === 'holds';
		const half = test.critical[CUSUMSQ_LEVELS.indexOf(0.05)]!;
		const line = Array.from({ length: n }, (_, j) => (j + 1) / n);
		return checkOf(id, {
			...common,
			verdict: softened ? notWorseThanQuery(plain) : plain,
			because: [
				...(plain === 'holds' ? [] : [test.side === 'above' ? 'variance-fell' : 'variance-rose']),
				...(softened ? ['cusum-holds'] : [])
			],
			statistic: { name: 'deviation', value: test.maxDeviation },
			parameters: { side: test.side, recursiveResiduals: n },
			pText: bracketText(test.pBetween),
			rejected: plain !== 'holds',
			criticalValues: CUSUMSQ_LEVELS.map((level, i) => ({
				level: `${Math.round(100 * level)}%`,
				value: test.critical[i]!
			})),
			n: model.fit.nobs,
			plot: Object.freeze({
				kind: 'cusumsq' as const,
				periods: line.map((_, j) => periodOfRow(model, test.first + j)),
				path: Array.from(test.path),
				lower: line.map((share) => share - half),
				upper: line.map((share) => share + half)
			})
		});
	}
);

/** The equation with its gap as a regressor: all regressors stationary when the levels cointegrate. */
const gapForm = (model: Model): OlsFit | Refusal => {
	if (model.form === 'gap') return model.fit ?? refuse('given', noFit);
	if (!model.gap) return refuse('domain', 'The speed of adjustment is 0, so there is no gap.');
	const { equation, sample } = model.data;
	const withGap: Equation = {
		...equation,
		longRun: { ...equation.longRun, trend: false },
		shortRun: { ...equation.shortRun, constant: equation.shortRun.constant || equation.longRun.constant },
		// Values imposed on levels have no place beside the gap.
		fixed: equation.fixed.filter(
			({ term }) => term.startsWith('d.') || equation.dummies.some(({ name }) => name === term)
		)
	};
	const design = equationDesign(withGap, sample, { gap: model.gap });
	return isRefusal(design) ? design : ols(design.y, design.design);
};

/** Value of sup-F at which its p-value is `level`, by bisection: the p-value falls with the statistic. */
const criticalSupF = (k: number, lambda: number, level: number): number => {
	let [low, high] = [0, 200 + 4 * k];
	for (let i = 0; i < 60; i++) {
		const middle = (low + high) / 2;
		if (hansenP('sup', middle, k, lambda, true) > level) low = middle;
		else high = middle;
	}
	return (low + high) / 2;
};

const ofSupF = (context: Context, model: Model, fit: OlsFit, test: SupF): Check => {
	const id = 'stability.sup-f';
	const critical = criticalSupF(fit.k, test.lambda, context.levels.query);
	const common = {
		source: sources[id]!,
		nullHypothesis: 'no-break',
		lines: ['trim'],
		levels: ['query', 'fails'],
		statistic: { name: 'sup F', value: test.sup.stat },
		parameters: {
			form: 'gap',
			k: fit.k,
			from: periodOfRow(model, test.from + 1),
			to: periodOfRow(model, test.to + 1),
			// People are shown the first period of the second regime.
			breakFrom: periodOfRow(model, test.breakIndex + 1),
			lambda: test.lambda,
			...(test.beyondTable && { beyondTable: true })
		},
		pValue: test.sup.pGuarded,
		rejected: test.sup.pGuarded < context.levels.query,
		criticalValues: [{ level: `${Number((100 * context.levels.query).toPrecision(6))}%`, value: critical }],
		n: fit.nobs,
		plot: Object.freeze({
			kind: 'sup-f' as const,
			periods: Array.from(test.path, (_, i) => periodOfRow(model, test.from + i + 1)),
			path: Array.from(test.path),
			critical
		})
	};
	if (test.widened)
		return notAssessable(
			id,
			'empty-trim',
			`${fit.k} coefficients on ${fit.nobs} rows leave less room than the trim asks for.`,
			common
		);
	return checkOf(id, {
		...common,
		...underAutocorrelation(context, badRejection(test.sup.pGuarded, context.levels))
	});
};

/** Largest F over the break dates of the trimmed sample, on the gap form. */
export const stabilitySupF = onModel('stability.sup-f', sources['stability.sup-f']!, (context, model) => {
	const id = 'stability.sup-f';
	const common = {
		source: sources[id]!,
		nullHypothesis: 'no-break',
		lines: ['trim'],
		levels: ['query', 'fails']
	};
	if (context.spec.estimator.kind === 'elsewhere') return notAssessable(id, 'given', noFit, common);
	const fit = gapForm(model);
	if (isRefusal(fit)) return refusedCheck(id, fit, common);
	const test = supF(fit, context.settings.number(linePath(id, 'trim')));
	return isRefusal(test) ? refusedCheck(id, test, common) : ofSupF(context, model, fit, test);
});
