import type { Data } from '$lib/battery/data';
import { periodText } from '$lib/domain/period';
import type { Specification } from '$lib/domain/specification';
import { drawNormal, mulberry32 } from '$lib/econometrics/random/mulberry32';

/** Invented quarterly series from a seed: x wanders, y follows it (or not) as told. */
export interface Simulation {
	readonly seed: number;
	readonly n: number;
	readonly speed: number;
	/** Slope of the long run before and after the break. */
	readonly slope: readonly [before: number, after: number];
	/** Row from which the second slope holds; n for none. */
	readonly breakAt: number;
	/** y wanders by itself. */
	readonly unrelated?: boolean;
}

export const simulated = ({ seed, n, speed, slope, breakAt, unrelated = false }: Simulation): Data => {
	const next = mulberry32(seed);
	const x: number[] = [10];
	const y: number[] = [10 * slope[0]];
	for (let t = 1; t < n; t++) {
		const theta = t < breakAt ? slope[0] : slope[1];
		const before = y[t - 1]!;
		const pull = unrelated ? 0 : -speed * (before - theta * x[t - 1]!);
		x.push(x[t - 1]! + drawNormal(next));
		y.push(before + pull + (unrelated ? 1 : 0.4) * drawNormal(next));
	}
	return {
		frequency: 'quarterly',
		periods: x.map((_, i) => periodText(1980 * 4 + i, 'quarterly')),
		columns: [
			{ name: 'y', values: y },
			{ name: 'x', values: x }
		]
	};
};

/** y on x, one step or two. */
export const simulatedSpecification = (data: Data, more: Partial<Specification> = {}): Specification => ({
	schema: 1,
	frequency: 'quarterly',
	series: ['y', 'x'].map((name) => ({ name, column: name, unit: 'index', transform: [] })),
	dependent: 'y',
	longRun: {
		drivers: [{ series: 'x', sign: '+', plausible: [0.5, 1.5], rationale: 'invented' }],
		constant: true,
		trend: false
	},
	shortRun: { own: [], drivers: [{ series: 'x', lags: [0], sign: '+' }], constant: true },
	dummies: [],
	fixed: [],
	sample: { from: data.periods[0]!, to: data.periods.at(-1)! },
	estimator: { kind: 'two-step' },
	standardErrors: 'ols',
	...more
});
