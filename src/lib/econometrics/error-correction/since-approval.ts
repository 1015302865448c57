import { isRefusal, refuse, type Refusal } from '../refusal';
import { equationDesign, type EquationDesign } from './design';
import type { Equation, Relation, Sample } from './equation';
import { gapFrom } from './gap';
import { autoregression } from './half-life';
import { shockResponse } from './multipliers';
import { projection } from './projection';
import type { Coefficients } from './terms';
import { withLevels } from './with-levels';

/** An equation as it was approved: values, covariance and residual variance frozen after period `known`. */
export interface Approved {
	readonly coefficients: Coefficients;
	/** The long run of an equation around a gap; null where the levels are free. */
	readonly relation: Relation | null;
	readonly sigma: number;
	readonly known: number;
}

/** Dynamic path from the approved equation with actual drivers, against what happened. */
export interface SinceApproval {
	/** Path of the dependent variable over the new periods, its own lags fed back. */
	readonly path: Float64Array;
	/** Outcome less path. */
	readonly errors: Float64Array;
	/** Standard deviation of each error: new shocks and the spread of the coefficients. */
	readonly deviations: Float64Array;
	/** Sum of the errors over its standard deviation; beyond 2 or 3 the equation has left its own spread. */
	readonly z: number;
}

/**
 * Errors of an approved equation over the periods after approval. With psi the response to a shock and G the
 * derivative of the path, the errors have covariance sigma^2 Psi Psi' + G V G'; leaving out the second term makes a
 * sound equation look wrong. Refuses `given` without a covariance, `not-observable` without a new period.
 */
export function sinceApproval(
	approved: Approved,
	equation: Equation,
	sample: Sample
): SinceApproval | Refusal {
	const { coefficients, known, sigma, relation } = approved;
	const horizon = sample.T - known;
	if (horizon < 1) return refuse('not-observable', 'there is no period after approval yet');
	if (coefficients.covariance === null) return refuse('given', 'the coefficients have no covariance');
	const path = frozenPath(approved, equation, sample);
	if (isRefusal(path)) return path;
	const outcome = sample.series.get(equation.dependent)!;
	const errors = path.map((value, h) => outcome[known + h]! - value);
	const rows = rowsOnPath(equation, sample, path, known, relation);
	if (isRefusal(rows)) return rows;
	const derivatives = pathDerivatives(rows, coefficients, known, horizon);
	if (isRefusal(derivatives)) return derivatives;
	const psi = shockResponse(autoregression(coefficients), horizon);
	const deviations = derivatives.map((g, h) => {
		let shocks = 0;
		for (let j = 0; j <= h; j++) shocks += psi[j]! ** 2;
		return Math.sqrt(sigma ** 2 * shocks + quadratic(g, coefficients.covariance!));
	});
	const total = derivatives[0]!.map((_, i) => derivatives.reduce((sum, g) => sum + g[i]!, 0));
	const spread = sigma ** 2 * cumulatedShocks(psi, horizon) + quadratic(total, coefficients.covariance);
	const sum = errors.reduce((a, b) => a + b, 0);
	return Object.freeze({
		path,
		errors,
		deviations: Float64Array.from(deviations),
		z: sum / Math.sqrt(spread)
	});
}

function frozenPath(approved: Approved, equation: Equation, sample: Sample): Float64Array | Refusal {
	const { coefficients, relation, known } = approved;
	const cut = (v: Float64Array) => v.slice(0, known);
	const later = (v: Float64Array) => v.slice(known, sample.T);
	const before: Sample = {
		T: known,
		series: new Map([...sample.series].map(([name, v]) => [name, cut(v)]))
	};
	return projection(
		relation ? withLevels(coefficients, relation) : coefficients,
		{ ...equation, dummies: equation.dummies.map((dummy) => ({ ...dummy, values: cut(dummy.values) })) },
		before,
		{
			horizon: sample.T - known,
			drivers: new Map([...sample.series].map(([name, v]) => [name, later(v)])),
			dummies: new Map(equation.dummies.map(({ name, values }) => [name, later(values)]))
		}
	);
}

/** Regressors of the equation with the path in the place of what happened. */
function rowsOnPath(
	equation: Equation,
	sample: Sample,
	path: Float64Array,
	known: number,
	relation: Relation | null
): EquationDesign | Refusal {
	const own = sample.series.get(equation.dependent)!.slice();
	own.set(path, known);
	const onPath: Sample = { T: sample.T, series: new Map([...sample.series, [equation.dependent, own]]) };
	const form = relation ? { gap: gapFrom(relation, equation, onPath) } : 'levels';
	return equationDesign(equation, onPath, form);
}

/** G_h = r_h + sum mu_i G_(h-i): how the path moves with every coefficient; fixed ones do not move it. */
function pathDerivatives(
	rows: EquationDesign,
	coefficients: Coefficients,
	known: number,
	horizon: number
): readonly Float64Array[] | Refusal {
	const first = known + 1 - rows.firstPeriod;
	if (first < 0) return refuse('too-short', `${known} periods before approval are fewer than the lags need`);
	const mu = autoregression(coefficients);
	const derivatives: Float64Array[] = [];
	for (let h = 0; h < horizon; h++) {
		const g = new Float64Array(coefficients.terms.length);
		rows.design.columns.forEach((column, j) => (g[j] = column[first + h]!));
		for (let i = 1; i <= Math.min(h, mu.length); i++) {
			for (let j = 0; j < g.length; j++) g[j]! += mu[i - 1]! * derivatives[h - i]![j]!;
		}
		derivatives.push(g);
	}
	return derivatives;
}

function quadratic(g: Float64Array, v: Float64Array): number {
	let sum = 0;
	for (let j = 0; j < g.length; j++)
		for (let i = 0; i < g.length; i++) sum += g[i]! * v[j * g.length + i]! * g[j]!;
	return sum;
}

/** Sum over shocks of the squared sum of their responses up to the horizon. */
function cumulatedShocks(psi: Float64Array, horizon: number): number {
	let total = 0;
	let response = 0;
	for (let length = 1; length <= horizon; length++) {
		response += psi[length - 1]!;
		total += response ** 2;
	}
	return total;
}
