import { breuschGodfrey } from '$lib/econometrics/diagnostics/breusch-godfrey';
import { ljungBox } from '$lib/econometrics/diagnostics/ljung-box';
import { isRefusal } from '$lib/econometrics/refusal';
import { linePath } from '$lib/domain/policy';
import type { Part } from '$lib/domain/run-result';
import { onModel, refusedCheck, refusedPart, tooFew } from '../context';
import { overlapOf } from '../covariance';
import { beyondOverlap } from '../overlap';
import { sources } from '../sources';
import { badRejection, notWorseThanQuery } from '../verdict';

import { auxiliary, levelNames, projected, worseOf, yearly } from './residual-parts';
/** Breusch-Godfrey F at order 1 and at a year; the worse counts. */
export const residualAutocorrelation = onModel(
	'residual.autocorrelation',
	sources['residual.autocorrelation']!,
	(context, model) => {
		const id = 'residual.autocorrelation';
		const common = {
			source: sources[id]!,
			nullHypothesis: 'no-autocorrelation',
			lines: ['least', 'first'],
			levels: levelNames
		};
		const overlap = overlapOf(context.spec);
		if (overlap > 1) return beyondOverlap(id, context, model, overlap, common);
		const fit = auxiliary(model);
		if (isRefusal(fit)) return refusedCheck(id, fit, common);
		const least = context.settings.number(linePath(id, 'least'));
		const orders = [context.settings.number(linePath(id, 'first')), yearly(context)];
		const parts = orders.map((order): Part => {
			const about = `order ${order}`;
			const test =
				tooFew(fit.nobs - fit.k - order, least, 'degrees of freedom') ?? breuschGodfrey(fit, order);
			if (isRefusal(test)) return refusedPart(about, test);
			return Object.freeze({
				about,
				statistic: { name: 'F', value: test.f },
				parameters: { order, df1: test.df1, df2: test.df2, lm: test.lm, lmP: test.lmP },
				pValue: test.fP,
				n: fit.nobs,
				verdict: badRejection(test.fP, context.levels)
			});
		});
		return worseOf(id, parts, fit.nobs, context.levels.query, { ...common, parameters: projected(model) });
	}
);

/** Ljung-Box over one to three years: with lagged dependent variables only a guide, so at most a query. */
export const residualPortmanteau = onModel(
	'residual.portmanteau',
	sources['residual.portmanteau']!,
	(context, model) => {
		const id = 'residual.portmanteau';
		const common = {
			source: sources[id]!,
			nullHypothesis: 'no-autocorrelation',
			lines: ['years', 'least'],
			levels: ['query']
		};
		const n = model.residuals.length;
		const perLag = context.settings.number(linePath(id, 'least'));
		const lags = context.settings.numbers(linePath(id, 'years')).map((years) => years * yearly(context));
		const parts = lags.map((lag): Part => {
			const about = `${lag} lags`;
			const test = tooFew(n, perLag * lag, 'rows') ?? ljungBox(model.residuals, lag);
			if (isRefusal(test)) return refusedPart(about, test);
			return Object.freeze({
				about,
				statistic: { name: 'Q', value: test.lb },
				parameters: { lags: lag, df: test.df },
				pValue: test.lbP,
				n,
				verdict: notWorseThanQuery(badRejection(test.lbP, context.levels))
			});
		});
		const shown = ljungBox(model.residuals, Math.min(Math.max(...lags), Math.floor(n / 2)));
		const check = worseOf(id, parts, n, context.levels.query, common);
		return isRefusal(shown)
			? check
			: Object.freeze({
					...check,
					plot: Object.freeze({
						kind: 'acf' as const,
						acf: Array.from(shown.acf),
						bound: 1.959963984540054 / Math.sqrt(n)
					})
				});
	}
);
