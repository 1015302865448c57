import { refuse, type Refusal } from '../refusal';
import type { CriticalValues } from '../unit-root/mackinnon';
import surface from './ecm-t-surface.json';
import bounds from './pss.json';

/** [I(0), I(1)] bound by level. */
export type BoundsByLevel = Readonly<Record<'10%' | '5%' | '2.5%' | '1%', readonly [number, number]>>;

/** t-test of the speed of adjustment in a one-step equation with free levels: no level relation under the null. */
export interface EcmT {
	/** t-ratio of y(t-1); below the critical value rejects. */
	readonly stat: number;
	readonly det: 'c' | 'ct';
	readonly drivers: number;
	/** Rows that the surface is read at: those of the regression less the short-run terms beyond dx(t). */
	readonly effectiveRows: number;
	/** Finite-sample values when every driver is I(1); null above 8 drivers or below 30 rows. */
	readonly critical: CriticalValues | null;
	/** Asymptotic bounds for drivers all I(0) or all I(1); null above 10 drivers. */
	readonly bounds: BoundsByLevel | null;
}

/** What the bounds say at one level. */
export type BoundsReading = 'rejected' | 'inconclusive' | 'not rejected';

const LEAST_ROWS = 30;

/**
 * Puts the t-ratio of y(t-1) beside its critical values: a simulated surface in the number of rows for I(1)
 * drivers, and the asymptotic bounds of Pesaran, Shin & Smith (2001) J. Applied Econometrics 16, 289-326, tables
 * CII(iii) and (v). The test: Banerjee, Dolado & Mestre (1998) J. Time Series Analysis 19, 267-283.
 */
export function ecmT(
	stat: number,
	equation: {
		readonly det: 'c' | 'ct';
		readonly drivers: number;
		readonly nobs: number;
		/** Short-run terms and dummies other than dx(t) of the long-run drivers. */
		readonly extraTerms: number;
	}
): EcmT | Refusal {
	const { det, drivers, nobs, extraTerms } = equation;
	if (!Number.isFinite(stat)) return refuse('non-finite', 'the t-ratio of the speed is not a finite number');
	if (drivers < 1) return refuse('too-short', 'a relation needs at least one driver');
	const effectiveRows = nobs - extraTerms;
	return Object.freeze({
		stat,
		det,
		drivers,
		effectiveRows,
		critical: effectiveRows < LEAST_ROWS ? null : ecmTCritical(det, drivers, effectiveRows),
		bounds: tBounds(det, drivers)
	});
}

/** The simulated surface b0 + b1/n + b2/n^2 at n rows; null above 8 drivers. */
export function ecmTCritical(det: 'c' | 'ct', drivers: number, rows: number): CriticalValues | null {
	const row = surface[det][drivers - 1];
	if (row === undefined) return null;
	const at = (level: number) => row[level]![0]! + row[level]![1]! / rows + row[level]![2]! / rows ** 2;
	return Object.freeze({ '1%': at(0), '5%': at(1), '10%': at(2) });
}

/** Bounds of the t-ratio with unrestricted constant (c) or unrestricted constant and trend (ct). */
export const tBounds = (det: 'c' | 'ct', drivers: number): BoundsByLevel | null =>
	(bounds.t[det === 'c' ? '3' : '5'][drivers] as BoundsByLevel | undefined) ?? null;

/** Reads a statistic that rejects below its bounds. */
export function readTBounds(stat: number, [i0, i1]: readonly [number, number]): BoundsReading {
	if (stat < i1) return 'rejected';
	return stat < i0 ? 'inconclusive' : 'not rejected';
}
