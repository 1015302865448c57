import { differencesOnly, levelsOnly } from '$lib/econometrics/error-correction/companions';
import { largestLag } from '$lib/econometrics/error-correction/design';
import { isRefusal, type Refusal } from '$lib/econometrics/refusal';
import type { Companion } from '$lib/domain/run-result';
import type { Context } from './context';
import { regressionEstimates } from './regression-estimates';
import { residualLagsOf } from './relation';

const refusedCompanion = (kind: Companion['kind'], { refused, detail }: Refusal): Companion =>
	Object.freeze({ kind, estimates: null, refused: Object.freeze({ reason: refused, detail }) });

/** The two cheaper models that an error-correction model claims to beat: differences alone, and levels alone. */
export const companionsOf = (context: Context): readonly Companion[] => {
	if (isRefusal(context.sample)) {
		const refusal = context.sample;
		return [refusedCompanion('differences-only', refusal), refusedCompanion('levels-only', refusal)];
	}
	const { equation, sample, periods } = context.sample;
	const differences = differencesOnly(equation, sample);
	const levels = levelsOnly(equation, sample, residualLagsOf(context, sample.T));
	return [
		isRefusal(differences)
			? refusedCompanion('differences-only', differences)
			: Object.freeze({
					kind: 'differences-only' as const,
					estimates: regressionEstimates(
						context.spec,
						differences.fit,
						'short',
						periods,
						largestLag(equation) + 2
					),
					...(differences.longRunF && {
						longRunF: {
							value: differences.longRunF.F,
							df1: differences.longRunF.df1,
							df2: differences.longRunF.df2
						}
					})
				}),
		isRefusal(levels)
			? refusedCompanion('levels-only', levels)
			: Object.freeze({
					kind: 'levels-only' as const,
					estimates: regressionEstimates(context.spec, levels.fit, 'long', periods, 1),
					...(levels.reading === 'levels wander together without cointegrating' && {
						warning: 'spurious-levels' as const
					}),
					...(levels.reading === 'not established' && { warning: 'not-established' as const })
				})
	];
};
