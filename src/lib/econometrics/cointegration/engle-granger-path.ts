import { isRefusal } from '../refusal';
import { engleGranger, type ResidualLags, type StaticModel } from './engle-granger';

/** The test on the sample up to one period. */
export interface PathPoint {
	/** Last period used. */
	readonly end: number;
	readonly stat: number;
	/** 5 % value for that sample. */
	readonly critical: number;
}

/**
 * The Engle-Granger statistic at every end of the sample from period `first` on, the relation estimated anew each
 * time, with the value for its own number of observations. Ends at which the test is refused or has no table are
 * left out; the verdict belongs to the last end alone.
 */
export function engleGrangerPath(
	model: StaticModel,
	lags: ResidualLags,
	first: number
): readonly PathPoint[] {
	const points: PathPoint[] = [];
	for (let end = first; end <= model.y.length; end++) {
		const cut = <R extends { readonly column: Float64Array }>(r: R): R => ({
			...r,
			column: r.column.slice(0, end)
		});
		const test = engleGranger(
			{
				...model,
				y: model.y.slice(0, end),
				drivers: model.drivers.map(cut),
				// A dummy that is not yet switched on is no regressor.
				dummies: (model.dummies ?? []).map(cut).filter(({ column }) => column.some((value) => value !== 0))
			},
			lags
		);
		if (!isRefusal(test) && test.critical)
			points.push(Object.freeze({ end, stat: test.stat, critical: test.critical['5%'] }));
	}
	return Object.freeze(points);
}
