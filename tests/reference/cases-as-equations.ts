import type { StaticModel } from '$lib/econometrics/cointegration/engle-granger';
import type { Dummy, Equation, Sample } from '$lib/econometrics/error-correction/equation';
import { listOf, seriesOf, type Case, type Check, type EcmModel } from './reference';

/** How a check of a case describes its equation; what it leaves open is taken from the model of the case. */
interface Shape {
	readonly det: 'n' | 'c' | 'ct';
	readonly p: number;
	readonly q: readonly number[];
	/** Period of the year of the first observation, where there are seasonal dummies. */
	readonly firstPeriod?: number;
}

export function shapeOf(of: Case, check: Check): Shape {
	const model = of.model as EcmModel;
	const { det, static_det, p, q, first_period } = check.params;
	return {
		det: (det ?? static_det ?? model.det) as Shape['det'],
		p: (p ?? model.p) as number,
		q: listOf((q ?? model.q) as number | readonly number[]),
		...(first_period === undefined ? {} : { firstPeriod: first_period as number })
	};
}

/** The equation of a case with every lag up to p and q. */
export function equationFrom(of: Case, { det, p, q, firstPeriod }: Shape): Equation {
	const model = of.model as EcmModel;
	const drivers = listOf(model.x);
	return {
		dependent: model.y,
		longRun: { drivers, constant: det !== 'n', trend: det === 'ct' },
		shortRun: {
			own: Array.from({ length: p }, (_, i) => i + 1),
			drivers: drivers.map((series, j) => ({ series, lags: Array.from({ length: q[j]! + 1 }, (_, l) => l) })),
			constant: det !== 'n'
		},
		dummies: firstPeriod === undefined ? [] : seasonal(of, firstPeriod),
		fixed: []
	};
}

function seasonal(of: Case, firstPeriod: number): Dummy[] {
	const perYear = of.frequency!;
	return Array.from({ length: perYear - 1 }, (_, j) => ({
		name: `s${j + 1}`,
		kind: 'seasonal',
		in: 'short',
		values: Float64Array.from({ length: of.T }, (_, i) => ((i + firstPeriod - 1) % perYear === j ? 1 : 0))
	}));
}

export function sampleFrom(of: Case): Sample {
	const model = of.model as EcmModel;
	const names = [model.y, ...listOf(model.x)];
	return { T: of.T, series: new Map(names.map((name) => [name, seriesOf(of, name)])) };
}

export function staticModelFrom(of: Case, det: 'c' | 'ct'): StaticModel {
	const model = of.model as EcmModel;
	return {
		y: seriesOf(of, model.y),
		det,
		drivers: listOf(model.x).map((name) => ({ name, column: seriesOf(of, name) }))
	};
}
