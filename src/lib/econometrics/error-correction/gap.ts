import type { Equation, Relation, Sample } from './equation';

/** The long-run value of the dependent variable in every period: constant, trend, drivers and dummies. */
export function equilibrium(relation: Relation, equation: Equation, sample: Sample): Float64Array {
	const path = Float64Array.from(
		{ length: sample.T },
		(_, i) => relation.constant + relation.trend * (i + 1)
	);
	const add = (values: Float64Array, weight: number) => {
		for (let i = 0; i < path.length; i++) path[i]! += weight * values[i]!;
	};
	for (const { series, value } of relation.slopes) add(sample.series.get(series)!, value);
	for (const { name, value } of relation.dummies)
		add(equation.dummies.find((dummy) => dummy.name === name)!.values, value);
	return path;
}

/** Dependent variable less its long-run value, one value a period. */
export function gapFrom(relation: Relation, equation: Equation, sample: Sample): Float64Array {
	const path = equilibrium(relation, equation, sample);
	const y = sample.series.get(equation.dependent)!;
	return path.map((value, i) => y[i]! - value);
}
