import { refuse, type Refusal } from '../refusal';
import type { Equation, Sample } from './equation';
import { toLevels } from './adl';
import type { Coefficients, Term } from './terms';

/** What happens to everything but the dependent variable after the sample, one value a period. */
export interface Future {
	readonly horizon: number;
	readonly drivers: ReadonlyMap<string, Float64Array>;
	/** Dummies of the equation; one that is not listed is 0 from here on. */
	readonly dummies: ReadonlyMap<string, Float64Array>;
}

/**
 * Path of the dependent variable over the `horizon` periods after the sample, its own lags fed back, drivers as
 * given: the expected path without new errors. `ecm` is an equation in error-correction form with free levels; one
 * around a gap is brought there by withLevels. Refuses `no-scenario` where a driver has no path.
 */
export function projection(
	ecm: Coefficients,
	equation: Equation,
	sample: Sample,
	future: Future
): Float64Array | Refusal {
	const levels = toLevels(ecm);
	const missing = levels.terms.find(
		(term) => term.kind === 'driver-level' && future.drivers.get(term.series)?.length !== future.horizon
	);
	if (missing?.kind === 'driver-level')
		return refuse('no-scenario', `there is no path of ${missing.series} over ${future.horizon} periods`);
	const paths = extended(equation, sample, future);
	const own = new Float64Array(sample.T + future.horizon);
	own.set(sample.series.get(equation.dependent)!);
	for (let t = sample.T; t < own.length; t++) {
		levels.terms.forEach((term, i) => {
			own[t]! += levels.values[i]! * regressor(term, t, own, paths);
		});
	}
	return own.slice(sample.T);
}

/** Drivers and dummies over sample and horizon. */
interface Paths {
	readonly drivers: ReadonlyMap<string, Float64Array>;
	readonly dummies: ReadonlyMap<string, Float64Array>;
}

function extended(equation: Equation, sample: Sample, future: Future): Paths {
	const joined = (past: Float64Array, next: Float64Array | undefined) => {
		const path = new Float64Array(sample.T + future.horizon);
		path.set(past);
		if (next) path.set(next, sample.T);
		return path;
	};
	return {
		drivers: new Map(
			[...future.drivers].map(([name, next]) => [
				name,
				joined(sample.series.get(name) ?? new Float64Array(sample.T), next)
			])
		),
		dummies: new Map(
			equation.dummies.map(({ name, values }) => [name, joined(values, future.dummies.get(name))])
		)
	};
}

/** Value of a term of the levels form at element t; the trend counts periods from 1. */
function regressor(term: Term, t: number, own: Float64Array, paths: Paths): number {
	switch (term.kind) {
		case 'constant':
			return 1;
		case 'trend':
			return t + 1;
		case 'dummy':
			return paths.dummies.get(term.name)![t]!;
		case 'level-dummy':
			return paths.dummies.get(term.name)![t - 1]!;
		case 'own-level':
			return own[t - term.lag]!;
		case 'driver-level':
			return paths.drivers.get(term.series)![t - term.lag]!;
		default:
			// toLevels leaves none of the others.
			return 0;
	}
}
