import { refuse, type Refusal } from '../refusal';
import { studentTTwoSided } from '../distributions/student-t';
import type { Relation } from './equation';
import { covarianceAt, indexOf, valueOf, type Coefficients, type Term } from './terms';

/** An estimate with its delta-method error; se, t and p are null where the coefficients have no covariance. */
export interface Estimate {
	readonly coef: number;
	readonly se: number | null;
	readonly t: number | null;
	readonly p: number | null;
}

/** The long run that the levels of a one-step equation imply. */
export interface LongRun {
	readonly lambda: number;
	readonly slopes: readonly (Estimate & { readonly series: string })[];
	/** Constant of the equation over lambda. */
	readonly constant: Estimate | null;
	/** Slope in time of the relation. */
	readonly trend: Estimate | null;
	readonly dummies: readonly (Estimate & { readonly name: string })[];
	/** What the gap is measured from; with a trend its constant takes one period of drift. */
	readonly relation: Relation;
	/** Covariance of (lambda, slopes, constant), column-major, in that order; null without one. */
	readonly covariance: Float64Array | null;
}

const isOwnLevel = (term: Term) => term.kind === 'own-level' && term.lag === 1;

/**
 * Long-run coefficients theta = b / lambda of an equation with free levels, errors by the delta method. Bardsen
 * (1989) Oxford Bulletin 51, 345-350; Banerjee, Dolado, Galbraith & Hendry (1993) Co-integration,
 * Error-correction, and the Econometric Analysis of Non-stationary Data. Refuses `domain` at lambda = 0.
 */
export function longRun(coefficients: Coefficients): LongRun | Refusal {
	const lambda = -valueOf(coefficients, isOwnLevel);
	if (lambda === 0) return refuse('domain', 'the speed of adjustment is 0, so there is no long run');
	const { terms } = coefficients;
	const at = (kind: Term['kind']) => terms.flatMap((term, i) => (term.kind === kind ? [i] : []));
	const one = (kind: 'constant' | 'trend') => {
		const [position] = at(kind);
		return position === undefined ? null : estimate(coefficients, position);
	};
	const slopes = at('driver-level').map((i) =>
		Object.freeze({ series: (terms[i] as { series: string }).series, ...estimate(coefficients, i) })
	);
	const dummies = at('level-dummy').map((i) =>
		Object.freeze({ name: (terms[i] as { name: string }).name, ...estimate(coefficients, i) })
	);
	const constant = one('constant');
	const trend = one('trend');
	const relation: Relation = Object.freeze({
		// The gap of period t-1 holds trend (t - 1); the equation holds trend t.
		constant: (constant?.coef ?? 0) + (trend?.coef ?? 0),
		trend: trend?.coef ?? 0,
		slopes: slopes.map(({ series, coef }) => Object.freeze({ series, value: coef })),
		dummies: dummies.map(({ name, coef }) => Object.freeze({ name, value: coef }))
	});
	const covariance = jointCovariance(coefficients, [...at('driver-level'), ...at('constant')]);
	return Object.freeze({ lambda, slopes, constant, trend, dummies, relation, covariance });
}

/** b_i / lambda; var = (V_ii + theta^2 V_yy + 2 theta V_iy) / lambda^2, y the lagged level of the dependent. */
function estimate(coefficients: Coefficients, i: number): Estimate {
	const y = indexOf(coefficients, isOwnLevel);
	const lambda = -coefficients.values[y]!;
	const coef = coefficients.values[i]! / lambda;
	if (coefficients.covariance === null) return { coef, se: null, t: null, p: null };
	const v = (a: number, b: number) => covarianceAt(coefficients, a, b);
	const se = Math.sqrt(Math.max(0, v(i, i) + coef ** 2 * v(y, y) + 2 * coef * v(i, y))) / Math.abs(lambda);
	if (se === 0) return { coef, se, t: null, p: null };
	return { coef, se, t: coef / se, p: studentTTwoSided(coef / se, coefficients.df) };
}

/** J V J' with rows: lambda = -b_y; theta_i = b_i / lambda, which moves by 1/lambda and theta_i / lambda. */
function jointCovariance(coefficients: Coefficients, positions: readonly number[]): Float64Array | null {
	if (coefficients.covariance === null) return null;
	const y = indexOf(coefficients, isOwnLevel);
	const lambda = -coefficients.values[y]!;
	const rows = [
		{ own: y, byOwn: 0, byY: -1 },
		...positions.map((i) => ({ own: i, byOwn: 1 / lambda, byY: coefficients.values[i]! / lambda ** 2 }))
	];
	const size = rows.length;
	const joint = new Float64Array(size * size);
	for (const [r, a] of rows.entries()) {
		for (const [c, b] of rows.entries()) {
			joint[c * size + r] =
				a.byOwn * b.byOwn * covarianceAt(coefficients, a.own, b.own) +
				a.byOwn * b.byY * covarianceAt(coefficients, a.own, y) +
				a.byY * b.byOwn * covarianceAt(coefficients, y, b.own) +
				a.byY * b.byY * covarianceAt(coefficients, y, y);
		}
	}
	return joint;
}
