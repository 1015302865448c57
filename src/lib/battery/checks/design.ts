import { collinearity } from '$lib/econometrics/diagnostics/collinearity';
import { staticRegression } from '$lib/econometrics/error-correction/static-regression';
import { isRefusal } from '$lib/econometrics/refusal';
import { linePath } from '$lib/domain/policy';
import type { Verdict } from '$lib/domain/run';
import type { Part } from '$lib/domain/run-result';
import { checkOf, figure, onModel, refusedCheck, type AnyCheck } from '../context';
import { sources } from '../sources';

/** Variance inflation and condition number of the drivers' own design in levels: never more than a query. */
export const designCollinearity: AnyCheck = (context) => {
	const id = 'design.collinearity';
	const rest = { source: sources[id]!, lines: ['vif', 'condition'] };
	if (isRefusal(context.sample)) return refusedCheck(id, context.sample, rest);
	const fit = staticRegression(context.sample.equation, context.sample.sample);
	if (isRefusal(fit)) return refusedCheck(id, fit, rest);
	const found = collinearity(fit);
	if (isRefusal(found)) return refusedCheck(id, found, rest);
	const [vifLimit, conditionLimit] = ['vif', 'condition'].map((line) =>
		context.settings.number(linePath(id, line))
	);
	const parts = found.vif.map(({ name, vif }): Part =>
		Object.freeze({
			about: name,
			statistic: { name: 'VIF', value: figure(vif) },
			verdict: (vif > vifLimit! ? 'query' : 'holds') satisfies Verdict
		})
	);
	const conditioned = found.conditionNumber <= conditionLimit!;
	const ofEquation = isRefusal(context.model) ? undefined : context.model.fit?.conditionNumber;
	return checkOf(id, {
		...rest,
		verdict: conditioned && parts.every(({ verdict }) => verdict === 'holds') ? 'holds' : 'query',
		statistic: { name: 'condition', value: figure(found.conditionNumber) },
		parameters: {
			limit: conditionLimit!,
			vifLimit: vifLimit!,
			...(ofEquation !== undefined && Number.isFinite(ofEquation) && { conditionOfEquation: ofEquation })
		},
		parts,
		n: fit.nobs
	});
};

/** Rows for each estimated coefficient. */
export const designDegrees = onModel('design.degrees', sources['design.degrees']!, (context, model) => {
	const id = 'design.degrees';
	const n = model.residuals.length;
	const k = model.design.free.length;
	const ratio = n / k;
	const holdsFrom = context.settings.number(linePath(id, 'holds-from'));
	const failsBelow = context.settings.number(linePath(id, 'fails-below'));
	return checkOf(id, {
		verdict: ratio >= holdsFrom ? 'holds' : ratio >= failsBelow ? 'query' : 'fails',
		statistic: { name: 'n/k', value: ratio },
		parameters: { k, df: n - k },
		n,
		source: sources[id]!,
		lines: ['holds-from', 'fails-below']
	});
});
