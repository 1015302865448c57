import { autocorrelations } from '$lib/econometrics/diagnostics/autocorrelations';
import { normalSf } from '$lib/econometrics/distributions/normal';
import { periodsPerYear } from '$lib/domain/period';
import type { Part } from '$lib/domain/run-result';
import { checkOf, refusedCheck, tooFew, type Context, type Finding } from './context';
import { holm } from './family';
import type { Model } from './model';
import { badRejection } from './verdict';

/**
 * Overlapping targets (a year-on-year change, a moving sum) make errors a moving average of one order less than their
 * span, also in a sound model. Autocorrelation is therefore judged beyond it only: each of a year of lags against the
 * error of a moving-average process (Bartlett 1946, Supplement to the JRSS 8, 27-41), with Holm's correction.
 */
export const beyondOverlap = (
	id: string,
	context: Context,
	model: Model,
	span: number,
	common: Omit<Finding, 'verdict'>
) => {
	const n = model.residuals.length;
	const last = span + periodsPerYear[context.spec.frequency] - 1;
	const few = tooFew(n, 4 * last, 'rows');
	if (few) return refusedCheck(id, few, common);
	const r = autocorrelations(model.residuals, last);
	const within = r.slice(0, span - 1).reduce((sum, value) => sum + value * value, 0);
	const error = Math.sqrt((1 + 2 * within) / n);
	const lags = Array.from({ length: last - span + 1 }, (_, i) => span + i);
	const raw = lags.map((lag) => 2 * normalSf(Math.abs(r[lag - 1]!) / error));
	const corrected = holm(raw);
	const parts = lags.map((lag, i): Part =>
		Object.freeze({
			about: `lag ${lag}`,
			statistic: { name: 'r', value: r[lag - 1]! },
			parameters: { lag, error },
			pValue: corrected[i]!,
			n
		})
	);
	const p = Math.min(...corrected);
	const at = corrected.indexOf(p);
	return checkOf(id, {
		...common,
		verdict: badRejection(p, context.levels),
		because: ['overlapping-targets'],
		statistic: parts[at]!.statistic!,
		parameters: { span, lag: lags[at]! },
		pValue: p,
		rejected: p < context.levels.query,
		parts,
		n
	});
};
