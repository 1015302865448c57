import { normalCdf } from '../distributions/normal';
import tables from './mackinnon.json';

/** Deterministic terms of a test regression: none, constant, constant and trend, and trend squared. */
export type Deterministic = 'n' | 'c' | 'ct' | 'ctt';

/** Critical values by level; a statistic below the value rejects. */
export interface CriticalValues {
	readonly '1%': number;
	readonly '5%': number;
	readonly '10%': number;
}

const polynomial = (coefficients: readonly number[], x: number): number =>
	coefficients.reduceRight((sum, c) => sum * x + c, 0);

/**
 * Asymptotic p-value of a Dickey-Fuller type t-statistic with `variables` I(1) variables in the relation (1 for
 * a series of its own, drivers + 1 for residuals of an estimated relation); null where no surface exists.
 * MacKinnon (1994) J. Business & Economic Statistics 12, 167-176.
 */
export function mackinnonP(tau: number, det: Deterministic, variables: number): number | null {
	const { star, min, max, small, large } = tables.tau;
	const row = variables - 1;
	const smallP = small[det][row];
	const largeP = large[det][row];
	if (smallP === undefined || largeP === undefined) return null;
	const upper = max[det][row] ?? Infinity;
	if (tau > upper) return 1;
	if (tau < min[det][row]!) return 0;
	return normalCdf(polynomial(tau <= star[det][row]! ? smallP : largeP, tau));
}

/**
 * Critical values for a sample of `observations`, with `variables` as in {@link mackinnonP}; null where no surface
 * exists (more than 12 variables, or more than one without deterministic terms).
 * MacKinnon (2010) Queen's Economics Department Working Paper 1227.
 */
export function mackinnonCritical(
	det: Deterministic,
	variables: number,
	observations: number
): CriticalValues | null {
	const surfaces = tables.critical[det][variables - 1];
	if (surfaces === undefined) return null;
	const at = (row: number) => polynomial(surfaces[row]!, 1 / observations);
	return Object.freeze({ '1%': at(0), '5%': at(1), '10%': at(2) });
}
