import { indicator, seasonalDummies } from '$lib/econometrics/series/deterministic';
import { timelineOf, type Timeline } from '$lib/econometrics/series/timeline';
import { transform, type Transformed } from '$lib/econometrics/series/transform';
import type { Dummy, Equation, Sample } from '$lib/econometrics/error-correction/equation';
import { isRefusal, refuse, type Refusal } from '$lib/econometrics/refusal';
import { periodIndex, periodOfYear, periodsPerYear } from '$lib/domain/period';
import type { Specification } from '$lib/domain/specification';
import { gridOf, type Data, type Grid } from './data';

/** The data as the model sees them: transformed, complete, cut to the sample. */
export interface ModelSample {
	readonly equation: Equation;
	readonly sample: Sample;
	/** Periods of the sample; element t - 1 is period t. */
	readonly periods: readonly string[];
	/** The whole of each transformed series, before the cut. */
	readonly transformed: readonly Transformed[];
	readonly grid: Grid;
	/** The specification's sample is longer than the data. */
	readonly shortened: boolean;
}

/**
 * Transforms every series, cuts to the sample and builds the equation.
 *
 * @throws Invalid when frequency or columns are not those of the specification
 */
export const sampleOf = (spec: Specification, data: Data): ModelSample | Refusal => {
	const grid = gridOf(spec, data);
	const timeline = timelineOf(grid.periods);
	if (isRefusal(timeline)) return timeline;
	const transformed: Transformed[] = [];
	for (const { name, column, transform: steps } of spec.series) {
		const series = transform(name, grid.columns.get(column)!, steps, timeline, grid.columns);
		if (isRefusal(series)) return series;
		transformed.push(series);
	}
	const rows = cut(spec, timeline, transformed);
	if (isRefusal(rows)) return rows;
	const T = rows.last - rows.first + 1;
	const series = new Map(
		transformed.map(({ name, values }) => [name, values.slice(rows.first, rows.last + 1)])
	);
	return Object.freeze({
		equation: equationOf(spec, timeline.first + rows.first, T),
		sample: Object.freeze({ T, series }),
		periods: Object.freeze(grid.periods.slice(rows.first, rows.last + 1)),
		transformed: Object.freeze(transformed),
		grid,
		shortened: rows.shortened
	});
};

/** Rows of the grid inside the specification's sample where every series has a value. */
const cut = (
	spec: Specification,
	timeline: Timeline,
	transformed: readonly Transformed[]
): { first: number; last: number; shortened: boolean } | Refusal => {
	const from = periodIndex(spec.sample.from, spec.frequency)! - timeline.first;
	const to = periodIndex(spec.sample.to, spec.frequency)! - timeline.first;
	const first = Math.max(from, ...transformed.map((series) => series.first));
	const last = Math.min(to, ...transformed.map((series) => series.last));
	if (last - first < 1)
		return refuse(
			'too-short',
			`The series have no two periods in common between ${spec.sample.from} and ${spec.sample.to}.`
		);
	return { first, last, shortened: first !== from || last !== to };
};

const equationOf = (spec: Specification, first: number, T: number): Equation => {
	const rising = (lags: readonly number[]): number[] => [...lags].sort((a, b) => a - b);
	return Object.freeze({
		dependent: spec.dependent,
		longRun: {
			drivers: spec.longRun.drivers.map(({ series }) => series),
			constant: spec.longRun.constant,
			trend: spec.longRun.trend
		},
		shortRun: {
			own: rising(spec.shortRun.own),
			drivers: spec.shortRun.drivers.map(({ series, lags }) => ({ series, lags: rising(lags) })),
			constant: spec.shortRun.constant
		},
		dummies: spec.dummies.flatMap((dummy) => dummyColumns(spec, dummy, first, T)),
		fixed: spec.fixed.map(({ term, value }) => ({ term, value }))
	});
};

/** A pulse is 1 from `from` to `to` (one period without `to`), a step from `from` to `to` or the end. */
const dummyColumns = (
	spec: Specification,
	dummy: Specification['dummies'][number],
	first: number,
	T: number
): Dummy[] => {
	const row = (text: string | undefined, otherwise: number): number =>
		text === undefined ? otherwise : periodIndex(text, spec.frequency)! - first;
	const { name, kind } = dummy;
	const from = row(dummy.from, 0);
	if (kind !== 'seasonal') {
		const to = row(dummy.to, kind === 'pulse' ? from : T - 1);
		return [{ name, kind, values: indicator(name, from, to, T).column, in: dummy.in }];
	}
	const to = row(dummy.to, T - 1);
	const perYear = periodsPerYear[spec.frequency];
	return seasonalDummies(perYear, periodOfYear(first, spec.frequency), T).map(({ column }, j) => ({
		name: `${name}${j + 1}`,
		kind,
		values: column.map((value, i) => (i >= from && i <= to ? value : 0)),
		in: dummy.in
	}));
};
