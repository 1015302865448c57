import type { Relation } from './equation';
import { indexOf, type Coefficients, type Term } from './terms';

interface Part {
	readonly term: Term;
	readonly value: number;
}

/**
 * The error-correction form with free levels of an equation around a gap: the relation is multiplied out, so that
 * y(t-1) takes the coefficient on the gap, and constant, trend, drivers and dummies of the relation minus that times
 * their own. The covariance is left out, for the relation's own is not in it.
 */
export function withLevels(gapForm: Coefficients, relation: Relation): Coefficients {
	const at = indexOf(gapForm, (term) => term.kind === 'gap');
	const onGap = gapForm.values[at]!;
	const speed = -onGap;
	const ownConstant = indexOf(gapForm, (term) => term.kind === 'constant');
	// The gap of t-1 holds trend (t - 1): one period of drift goes to the constant.
	const constant =
		(ownConstant < 0 ? 0 : gapForm.values[ownConstant]!) + speed * (relation.constant - relation.trend);
	const rest = gapForm.terms.flatMap((term, i): Part[] =>
		i === at || i === ownConstant ? [] : [{ term, value: gapForm.values[i]! }]
	);
	const parts: Part[] = [
		...(constant === 0 && ownConstant < 0 ? [] : [{ term: { kind: 'constant' } as const, value: constant }]),
		...(relation.trend === 0 ? [] : [{ term: { kind: 'trend' } as const, value: speed * relation.trend }]),
		...rest.filter(({ term }) => term.kind === 'dummy'),
		{ term: { kind: 'own-level', lag: 1 }, value: onGap },
		...relation.slopes.map(({ series, value }): Part => ({
			term: { kind: 'driver-level', series, lag: 1 },
			value: speed * value
		})),
		...relation.dummies.map(({ name, value }): Part => ({
			term: { kind: 'level-dummy', name },
			value: speed * value
		})),
		...rest.filter(({ term }) => term.kind !== 'dummy')
	];
	return Object.freeze({
		terms: Object.freeze(parts.map((part) => part.term)),
		values: Float64Array.from(parts, (part) => part.value),
		covariance: null,
		df: gapForm.df
	});
}
