import { archLm } from '$lib/econometrics/diagnostics/arch-lm';
import { breuschPagan } from '$lib/econometrics/diagnostics/breusch-pagan';
import { jarqueBera } from '$lib/econometrics/diagnostics/jarque-bera';
import { reset } from '$lib/econometrics/diagnostics/reset';
import { whiteSpecial } from '$lib/econometrics/diagnostics/white-special';
import { isRefusal } from '$lib/econometrics/refusal';
import { harveyCollier } from '$lib/econometrics/stability/harvey-collier';
import { linePath } from '$lib/domain/policy';
import type { Verdict } from '$lib/domain/run';
import type { Part } from '$lib/domain/run-result';
import { checkOf, notAssessable, onModel, refusedCheck, refusedPart, tooFew, type Context } from '../context';
import { sources } from '../sources';
import { badRejection, notWorseThanQuery } from '../verdict';

import { auxiliary, levelNames, projected, underAutocorrelation, worseOf } from './residual-parts';
/** Departures of the variance cost no more than the standard errors: a query, and none where those are robust. */
const ofVariance = (context: Context, p: number): { verdict: Verdict; because: readonly string[] } => {
	const plain = badRejection(p, context.levels);
	if (plain === 'holds') return { verdict: 'holds', because: [] };
	return context.spec.standardErrors === 'ols'
		? { verdict: 'query', because: [] }
		: { verdict: 'holds', because: ['robust-errors'] };
};

/** Engle's test of autoregressive conditional variance at two orders. */
export const residualArch = onModel('residual.arch', sources['residual.arch']!, (context, model) => {
	const id = 'residual.arch';
	const common = {
		source: sources[id]!,
		nullHypothesis: 'no-arch',
		lines: ['orders', 'least'],
		levels: ['query']
	};
	const n = model.residuals.length;
	const few = tooFew(n, context.settings.number(linePath(id, 'least')), 'rows');
	if (few) return refusedCheck(id, few, common);
	const parts = context.settings.numbers(linePath(id, 'orders')).map((order): Part => {
		const test = archLm(model.residuals, order);
		if (isRefusal(test)) return refusedPart(`order ${order}`, test);
		return Object.freeze({
			about: `order ${order}`,
			statistic: { name: 'LM', value: test.lm },
			parameters: { order, df: order, f: test.f, fP: test.fP },
			pValue: test.lmP,
			n: test.nobs,
			verdict: ofVariance(context, test.lmP).verdict
		});
	});
	const check = worseOf(id, parts, n, context.levels.query, common);
	const because = check.pValue === undefined ? [] : ofVariance(context, check.pValue).because;
	return Object.freeze({ ...check, because });
});

/** Koenker's studentised Breusch-Pagan statistic, White's special form beside it. */
export const residualHeteroskedasticity = onModel(
	'residual.heteroskedasticity',
	sources['residual.heteroskedasticity']!,
	(context, model) => {
		const id = 'residual.heteroskedasticity';
		const common = {
			source: sources[id]!,
			nullHypothesis: 'equal-variance',
			lines: ['least'],
			levels: ['query']
		};
		const fit = auxiliary(model);
		if (isRefusal(fit)) return refusedCheck(id, fit, common);
		const few = tooFew(
			fit.nobs - fit.k,
			context.settings.number(linePath(id, 'least')),
			'degrees of freedom'
		);
		if (few) return refusedCheck(id, few, common);
		const test = breuschPagan(fit);
		if (isRefusal(test)) return refusedCheck(id, test, common);
		const white = whiteSpecial(fit);
		const variance = ofVariance(context, test.koenkerP);
		const unreliable = underAutocorrelation(context, variance.verdict);
		return checkOf(id, {
			...common,
			verdict: unreliable.verdict,
			because: [...variance.because, ...unreliable.because],
			statistic: { name: 'LM', value: test.koenker },
			parameters: { df: test.df, ...projected(model) },
			pValue: test.koenkerP,
			rejected: test.koenkerP < context.levels.query,
			n: fit.nobs,
			...(!isRefusal(white) && {
				parts: [
					Object.freeze({
						about: 'White, special form',
						statistic: { name: 'LM', value: white.special },
						parameters: { df: white.df },
						pValue: white.specialP,
						n: fit.nobs
					})
				]
			})
		});
	}
);

/** Jarque-Bera: at most a query, and a guide only in small samples. */
export const residualNormality = onModel(
	'residual.normality',
	sources['residual.normality']!,
	(context, model) => {
		const id = 'residual.normality';
		const common = {
			source: sources[id]!,
			nullHypothesis: 'normal',
			lines: ['least', 'guide-below'],
			levels: ['query']
		};
		const n = model.residuals.length;
		const few = tooFew(n, context.settings.number(linePath(id, 'least')), 'rows');
		if (few) return refusedCheck(id, few, common);
		const test = jarqueBera(model.residuals);
		if (isRefusal(test)) return refusedCheck(id, test, common);
		const guide = n < context.settings.number(linePath(id, 'guide-below'));
		return checkOf(id, {
			...common,
			verdict: notWorseThanQuery(badRejection(test.p, context.levels)),
			because: guide ? ['small-sample-guide'] : [],
			statistic: { name: 'JB', value: test.jb },
			parameters: { df: 2, skewness: test.skew, kurtosis: test.kurt },
			pValue: test.p,
			rejected: test.p < context.levels.query,
			n
		});
	}
);

/** RESET with powers of the fitted values, Harvey-Collier beside it. */
export const residualFunctionalForm = onModel(
	'residual.functional-form',
	sources['residual.functional-form']!,
	(context, model) => {
		const id = 'residual.functional-form';
		const common = {
			source: sources[id]!,
			nullHypothesis: 'linear',
			lines: ['powers', 'least'],
			levels: levelNames
		};
		if (!model.fit)
			return notAssessable(id, 'given', 'The coefficients were given; this test needs a fit.', common);
		const { fit } = model;
		const powers = context.settings.numbers(linePath(id, 'powers'));
		const few = tooFew(
			fit.nobs - fit.k,
			context.settings.number(linePath(id, 'least')),
			'degrees of freedom'
		);
		if (few) return refusedCheck(id, few, common);
		const test = reset(fit, powers);
		if (isRefusal(test)) return refusedCheck(id, test, common);
		const collier = harveyCollier(fit);
		return checkOf(id, {
			...common,
			...underAutocorrelation(context, badRejection(test.fP, context.levels)),
			statistic: { name: 'F', value: test.f },
			parameters: { powers: test.powers, df1: test.df1, df2: test.df2 },
			pValue: test.fP,
			rejected: test.fP < context.levels.query,
			n: fit.nobs,
			...(!isRefusal(collier) && {
				parts: [
					Object.freeze({
						about: 'Harvey-Collier',
						statistic: { name: 't', value: collier.t },
						parameters: { df: collier.df },
						pValue: collier.p
					})
				]
			})
		});
	}
);
