import { refuse, type Refusal } from '../refusal';
import { studentTUpperQuantile } from '../distributions/student-t';
import { adjustmentOf } from './fit';
import { dynamics } from './lag-polynomial';
import { shockResponse } from './multipliers';
import { covarianceAt, type Coefficients } from './terms';

/** Periods until half of a shock has gone, for good. */
export interface HalfLife {
	readonly periods: number;
	/** Delta method; null where the coefficients have no covariance. */
	readonly se: number | null;
	/** `high` is null where the interval of the speed reaches 0: the half-life may be without end. */
	readonly interval: { readonly low: number; readonly high: number | null } | null;
}

const HORIZON = 400;

/**
 * Half-life of a shock to an equation in error-correction form with coverage `level`. Without own lags it is
 * ln .5 / ln(1 - lambda) and its interval transforms the ends of the interval of lambda; with own lags it is read
 * off the response to a shock, with a delta-method interval. Refuses `domain` where the gap does not close.
 */
export function halfLife(coefficients: Coefficients, level: number): HalfLife | Refusal {
	const position = coefficients.terms.findIndex(isSpeed);
	const own = coefficients.terms.flatMap((term, i) => (term.kind === 'own-change' ? [i] : []));
	const periods = periodsFrom(coefficients, coefficients.values);
	if (typeof periods !== 'number') return periods;
	const { lambda, se } = adjustmentOf(coefficients);
	if (coefficients.covariance === null) return Object.freeze({ periods, se: null, interval: null });
	const quantile = studentTUpperQuantile((1 - level) / 2, coefficients.df);
	if (own.length === 0 && lambda < 1) {
		const ends = [lambda + quantile * se, lambda - quantile * se].map(closedForm);
		return Object.freeze({
			periods,
			se: Math.abs(closedFormSlope(lambda)) * se,
			interval: Object.freeze({ low: ends[0] ?? 0, high: ends[1] ?? null })
		});
	}
	const error = deltaError(coefficients, [position, ...own]);
	if (error === null) return Object.freeze({ periods, se: null, interval: null });
	const interval = { low: Math.max(0, periods - quantile * error), high: periods + quantile * error };
	return Object.freeze({ periods, se: error, interval: Object.freeze(interval) });
}

/** ln .5 / ln(1 - lambda) for 0 < lambda < 1; 0 at 1 and beyond, null at 0 and below. */
function closedForm(lambda: number): number | null {
	if (lambda <= 0) return null;
	return lambda >= 1 ? 0 : Math.log(0.5) / Math.log1p(-lambda);
}

const closedFormSlope = (lambda: number): number => Math.log(0.5) / ((1 - lambda) * Math.log1p(-lambda) ** 2);

const isSpeed = (term: Coefficients['terms'][number]): boolean =>
	term.kind === 'gap' || term.kind === 'own-level';

/** mu(1), mu(2), .. of the equation in levels, from the speed and the lags of dy. */
export function autoregression(coefficients: Coefficients, values = coefficients.values): Float64Array {
	const lags = coefficients.terms.map((term) => (term.kind === 'own-change' ? term.lag : 0));
	const mu = new Float64Array(Math.max(0, ...lags) + 1);
	mu[0] = 1;
	coefficients.terms.forEach((term, i) => {
		if (isSpeed(term)) mu[0]! += values[i]!;
		if (term.kind !== 'own-change') return;
		mu[term.lag - 1]! += values[i]!;
		mu[term.lag]! -= values[i]!;
	});
	return mu;
}

function periodsFrom(coefficients: Coefficients, values: Float64Array): number | Refusal {
	const mu = autoregression(coefficients, values);
	const lambda = -values[coefficients.terms.findIndex(isSpeed)]!;
	if (lambda <= 0) return refuse('domain', 'the gap does not close: the speed of adjustment is not positive');
	if (mu.length === 1 && lambda < 1) return closedForm(lambda)!;
	if (!dynamics(mu).stable) return refuse('domain', 'the gap does not close: the equation is not stable');
	return crossing(shockResponse(mu, HORIZON));
}

/** The first time from which the response stays within a half, between two periods by its logarithm. */
function crossing(psi: Float64Array): number | Refusal {
	let s = psi.length;
	while (s > 0 && Math.abs(psi[s - 1]!) <= 0.5) s--;
	if (s === psi.length) return refuse('domain', `more than half of a shock is left after ${HORIZON} periods`);
	const before = psi[s - 1]!;
	const after = psi[s]!;
	if (before * after <= 0) return s - 1 + (before - Math.sign(before) * 0.5) / (before - after);
	const drop = Math.log(Math.abs(before)) - Math.log(Math.abs(after));
	return s - 1 + (Math.log(Math.abs(before)) - Math.log(0.5)) / drop;
}

/** sqrt(g'Vg) with central differences of the half-life; null where a step leaves its domain. */
function deltaError(coefficients: Coefficients, positions: readonly number[]): number | null {
	const slopes: number[] = [];
	for (const i of positions) {
		const step = 1e-5 * Math.max(Math.abs(coefficients.values[i]!), 1e-2);
		const ends = [step, -step].map((shift) => {
			const moved = coefficients.values.slice();
			moved[i]! += shift;
			return periodsFrom(coefficients, moved);
		});
		const [up, down] = ends;
		if (typeof up !== 'number' || typeof down !== 'number') return null;
		slopes.push((up - down) / (2 * step));
	}
	let variance = 0;
	positions.forEach((i, a) =>
		positions.forEach((j, b) => (variance += slopes[a]! * slopes[b]! * covarianceAt(coefficients, i, j)))
	);
	return Math.sqrt(Math.max(0, variance));
}
