import { equilibrium } from '$lib/econometrics/error-correction/gap';
import { centred, sumOfSquares } from '$lib/econometrics/linalg/vectors';
import type { Figure, ModelSeries, SeriesUsed } from '$lib/domain/run-result';
import { figure } from './context';
import type { Model } from './model';
import type { ModelSample } from './sample';

/** Every transformed series over the sample. */
export const seriesUsed = (
	{ sample, periods }: ModelSample,
	units: ReadonlyMap<string, string>
): readonly SeriesUsed[] =>
	[...sample.series].map(([name, values]) =>
		Object.freeze({
			name,
			unit: units.get(name) ?? '',
			from: periods[0]!,
			to: periods.at(-1)!,
			values: Object.freeze(Array.from(values))
		})
	);

const figures = (values: Float64Array | null, length: number): readonly Figure[] =>
	Object.freeze(Array.from({ length }, (_, i) => figure(values?.[i])));

/** Standard deviation about the mean, divisor n - 1. */
const spread = (values: Float64Array): number =>
	Math.sqrt(sumOfSquares(centred(values)) / (values.length - 1));

/** Level, long run, gap and residuals over the periods of the sample. */
export const modelSeriesOf = (model: Model): ModelSeries => {
	const { equation, sample, periods } = model.data;
	const before = model.design.firstPeriod - 1;
	return Object.freeze({
		periods,
		level: Object.freeze(Array.from(sample.series.get(equation.dependent)!)),
		longRun: figures(model.relation && equilibrium(model.relation, equation, sample), sample.T),
		gap: figures(model.gap, sample.T),
		residuals: Object.freeze(
			Array.from({ length: sample.T }, (_, i) => (i < before ? null : figure(model.residuals[i - before])))
		),
		gapSd: model.gap ? figure(spread(model.gap)) : null
	});
};
