import { isRefusal, refuse, type Refusal } from '../refusal';
import { ols, type OlsFit } from '../regression/ols';

/** Estimates from some of the rows. Arrays follow the order of the fit's names. */
export interface WindowedCoefficients {
	/** First and last row used, 1-based. */
	readonly from: number;
	readonly to: number;
	readonly coef: Float64Array;
	readonly se: Float64Array;
}

/** Usual length of a window and end of the first sample: twice the coefficients, at least two fifths of the rows. */
export const usualWindow = (n: number, k: number): number => Math.max(2 * k, Math.floor(0.4 * n));

/** Estimates from the rows up to each of the given ends (1-based). Refuses what a fit of these rows refuses. */
export const recursiveCoefficients = (
	fit: OlsFit,
	ends: readonly number[]
): readonly WindowedCoefficients[] | Refusal =>
	over(
		fit,
		ends.map((end) => [1, end])
	);

/** Estimates from windows of the given length, each from its start (1-based) on. Refuses as recursiveCoefficients. */
export const rollingCoefficients = (
	fit: OlsFit,
	window: number,
	starts: readonly number[]
): readonly WindowedCoefficients[] | Refusal =>
	over(
		fit,
		starts.map((start) => [start, start + window - 1])
	);

function over(
	fit: OlsFit,
	spans: readonly (readonly [number, number])[]
): readonly WindowedCoefficients[] | Refusal {
	const out: WindowedCoefficients[] = [];
	for (const [from, to] of spans) {
		if (!(from >= 1 && to <= fit.nobs)) return refuse('lag', `There are no rows ${from} to ${to}.`);
		const columns = fit.design.columns.map((column) => column.slice(from - 1, to));
		const part = ols(fit.y.slice(from - 1, to), { names: fit.names, columns });
		if (isRefusal(part)) return refuse(part.refused, `Over rows ${from} to ${to}: ${part.detail}`);
		out.push(Object.freeze({ from, to, coef: part.coef, se: part.se }));
	}
	return Object.freeze(out);
}
