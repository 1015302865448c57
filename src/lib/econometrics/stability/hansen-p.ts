import { chiSquareSf } from '../distributions/chi-square';
import hansen from './hansen1997.json';

/** Largest, average and exponentially weighted F statistic over the possible break dates. */
export type BreakFunctional = 'sup' | 'ave' | 'exp';

/** Number of regressors up to which the approximation is published; beyond it the last one is used. */
export const HANSEN_MOST_REGRESSORS = 40;

const TRIMS = 25;

/**
 * Asymptotic p-value of a statistic over unknown break dates by the approximation of Hansen (1997, Journal of Business &
 * Economic Statistics 15, 60-67): x is the statistic in chi-square form (k times F), lambda the ratio that describes the
 * trimming. The polynomials of `ave` and `exp` turn down for very large x, so that the published formula gives 1 where
 * the truth is 0; `guarded` holds them at their maximum from there on.
 */
export function hansenP(
	functional: BreakFunctional,
	x: number,
	k: number,
	lambda: number,
	guarded: boolean
): number {
	const tau = lambda < 1 ? lambda : 1 / (1 + Math.sqrt(lambda));
	if (tau === 0.5) return chiSquareSf(x, k);
	const block = (Math.min(k, HANSEN_MOST_REGRESSORS) - 1) * TRIMS;
	const rowP = (trim: number): number => rowPValue(hansen[functional][block + trim - 1]!, x, guarded);
	if (tau <= 0.01) return rowP(TRIMS);
	if (tau >= 0.49) return 100 * ((0.5 - tau) * rowP(1) + (tau - 0.49) * chiSquareSf(x, k));
	// Row i of the table is trimming 0.51 - 0.02 i.
	const place = 50 * (0.51 - tau);
	const row = Math.floor(place);
	return (row + 1 - place) * rowP(row) + (place - row) * rowP(Math.min(row + 1, TRIMS));
}

/** Coefficients in ascending powers, then the degrees of freedom. */
function rowPValue(row: readonly number[], x: number, guarded: boolean): number {
	const coefficients = row.slice(0, -1);
	const argument = guarded ? Math.min(x, turningPoint(coefficients)) : x;
	const y = coefficients.reduceRight((value, b) => value * argument + b, 0);
	return chiSquareSf(Math.max(0, y), row[row.length - 1]!);
}

/** The least x > 0 at which a polynomial of degree up to 3 stops rising; infinite when it never does. */
function turningPoint([, b1 = 0, b2 = 0, b3 = 0]: readonly number[]): number {
	const a = 3 * b3;
	const b = 2 * b2;
	if (a === 0) return b < 0 ? -b1 / b : Infinity;
	const discriminant = b * b - 4 * a * b1;
	if (discriminant <= 0) return Infinity;
	const root = Math.sqrt(discriminant);
	const ends = [(-b - root) / (2 * a), (-b + root) / (2 * a)].filter((x) => x > 0);
	return ends.length === 0 ? Infinity : Math.min(...ends);
}
