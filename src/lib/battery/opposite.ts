import { shin } from '$lib/econometrics/cointegration/shin';
import { isRefusal } from '$lib/econometrics/refusal';
import { longLag } from '$lib/econometrics/unit-root/long-run-variance';
import { linePath } from '$lib/domain/policy';
import type { Part } from '$lib/domain/run-result';
import type { Specification } from '$lib/domain/specification';
import { staticModelOf } from './relation';
import type { ModelSample } from './sample';
import type { Settings } from './settings';
import { criticalAt } from './verdict';

/** The test of the opposite null, cointegration, beside those whose null is its absence. */
export interface Opposite {
	readonly part: Part;
	/** It rejects cointegration at the strict level of the policy. */
	readonly rejects: boolean;
}

const refit = 'residual.stationarity-refit';

/** Shin's test on the sample; undefined where it is too short or where no table applies. */
export const oppositeOf = (
	spec: Specification,
	sample: ModelSample,
	settings: Settings
): Opposite | undefined => {
	const { T } = sample.sample;
	if (T < settings.number(linePath(refit, 'shin-least'))) return undefined;
	const leads = spec.frequency === 'annual' ? 1 : settings.number(linePath(refit, 'shin-leads'));
	const test = shin(staticModelOf(sample), { leads, lag: longLag(T) });
	if (isRefusal(test) || !test.critical) return undefined;
	const { critical } = test;
	const strict = criticalAt(critical, settings.number('levels/against'));
	return Object.freeze({
		part: Object.freeze({
			about: 'Shin, null of cointegration',
			statistic: { name: 'eta', value: test.stat },
			parameters: { leads, lag: test.lag },
			criticalValues: (['10%', '5%', '1%'] as const).map((level) => ({ level, value: critical[level] })),
			n: test.nobs
		}),
		rejects: strict !== undefined && test.stat > strict
	});
};
