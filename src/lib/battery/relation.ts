import type { ResidualLags, StaticModel } from '$lib/econometrics/cointegration/engle-granger';
import { staticDeterministic } from '$lib/econometrics/error-correction/companions';
import { longRunDummies } from '$lib/econometrics/error-correction/equation';
import { defaultMaxLag, type LagRule } from '$lib/econometrics/unit-root/adf-auto';
import { linePath } from '$lib/domain/policy';
import type { Context } from './context';
import type { ModelSample } from './sample';

/** The relation in levels of a sample, as the residual-based tests take it. */
export const staticModelOf = ({ equation, sample }: ModelSample): StaticModel => ({
	y: sample.series.get(equation.dependent)!,
	det: staticDeterministic(equation),
	drivers: equation.longRun.drivers.map((name) => ({ name, column: sample.series.get(name)! })),
	dummies: longRunDummies(equation).map(({ name, kind, values }) => ({ name, kind, column: values }))
});

/** Lag rule of the residual-based tests: that of the policy, up to the cap of the frequency. */
export const residualLagsOf = (context: Context, observations: number): Exclude<ResidualLags, number> => ({
	rule: context.settings.text(linePath('cointegration.engle-granger', 'rule')) as LagRule,
	maxLag: defaultMaxLag(
		observations,
		context.settings.number(linePath('integration.adf', `cap-${context.spec.frequency}`))
	)
});
