import { isRefusal, refuse, type Refusal } from '../refusal';
import { normalSf } from '../distributions/normal';
import { equationDesign } from '../error-correction/design';
import type { Equation, Sample } from '../error-correction/equation';
import type { Term } from '../error-correction/terms';
import { leastSquares } from '../regression/least-squares';
import { ols } from '../regression/ols';
import { designOf } from '../series/design';
import type { BoundsByLevel, BoundsReading } from './ecm-t';
import narayan from './narayan.json';
import pss from './pss.json';

/**
 * Deterministic terms of the bounds test: 1 none; 2 constant restricted to the relation; 3 free constant; 4 free
 * constant, trend restricted to the relation; 5 free constant and trend.
 */
export type BoundsCase = 1 | 2 | 3 | 4 | 5;

/** Test of the null that y and the drivers have no relation in levels. */
export interface BoundsTest {
	readonly case: BoundsCase;
	readonly drivers: number;
	readonly nobs: number;
	readonly F: number;
	readonly df1: number;
	readonly df2: number;
	/** t-ratio of y(t-1), in cases 1, 3 and 5. */
	readonly t: number | null;
	/** F above I(1) rejects, below I(0) does not, between is inconclusive. */
	readonly FBounds: FBounds | null;
	/** t below I(1) rejects. */
	readonly tBounds: BoundsByLevel | null;
	/** Asymptotic p-values of F were all drivers I(0), or all I(1). */
	readonly FP: { readonly I0: number; readonly I1: number } | null;
}

export interface FBounds {
	readonly source: 'Narayan 2005' | 'Pesaran, Shin & Smith 2001';
	/** Row of the table: observations it was made for, null for the asymptotic one. */
	readonly observations: number | null;
	readonly levels: Readonly<Partial<Record<'10%' | '5%' | '2.5%' | '1%', readonly [number, number]>>>;
}

/**
 * Bounds test of an equation with free levels; `case` takes the place of its own deterministic terms. Pesaran, Shin
 * & Smith (2001) J. Applied Econometrics 16, 289-326; for 30 to 80 rows Narayan (2005) Applied Economics 37,
 * 1979-1990. Valid only when nothing is I(2).
 */
export function boundsTest(equation: Equation, sample: Sample, boundsCase: BoundsCase): BoundsTest | Refusal {
	const drivers = equation.longRun.drivers.length;
	if (drivers < 1) return refuse('too-short', 'a relation needs at least one driver');
	const design = equationDesign(withCase(equation, boundsCase), sample, 'levels');
	if (isRefusal(design)) return design;
	const full = ols(design.y, design.design);
	if (isRefusal(full)) return full;
	const tested = design.free.map((term) => isTested(term, boundsCase));
	const kept = design.design.names.flatMap((name, j) =>
		tested[j] ? [] : [{ name, column: design.design.columns[j]! }]
	);
	const restricted = leastSquares(design.y, designOf(kept));
	if (isRefusal(restricted)) return restricted;
	const df1 = tested.filter(Boolean).length;
	const df2 = full.nobs - full.k;
	const F = (restricted.rss - full.rss) / df1 / (full.rss / df2);
	const withT = boundsCase === 1 || boundsCase === 3 || boundsCase === 5;
	return Object.freeze({
		case: boundsCase,
		drivers,
		nobs: full.nobs,
		F,
		df1,
		df2,
		t: withT ? full.t[design.free.findIndex((term) => term.kind === 'own-level')]! : null,
		FBounds: boundsOfF(boundsCase, drivers, full.nobs),
		tBounds: withT ? ((pss.t[`${boundsCase}`][drivers] as BoundsByLevel | undefined) ?? null) : null,
		FP: pValues(F, boundsCase, drivers)
	});
}

const withCase = (equation: Equation, boundsCase: BoundsCase): Equation => ({
	...equation,
	longRun: { ...equation.longRun, constant: boundsCase > 1, trend: boundsCase > 3 },
	shortRun: { ...equation.shortRun, constant: boundsCase > 1 }
});

const isTested = (term: Term, boundsCase: BoundsCase): boolean =>
	term.kind === 'own-level' ||
	term.kind === 'driver-level' ||
	(term.kind === 'constant' && boundsCase === 2) ||
	(term.kind === 'trend' && boundsCase === 4);

/** From 30 to 80 rows the largest tabulated size not above the actual one, because the values fall with it. */
export function boundsOfF(boundsCase: BoundsCase, drivers: number, nobs: number): FBounds | null {
	if (nobs < 30) return null;
	if (boundsCase !== 1 && nobs <= 80) {
		const table: Readonly<Record<string, readonly FBounds['levels'][]>> = narayanCase(boundsCase);
		const size = Math.max(
			...Object.keys(table)
				.map(Number)
				.filter((n) => n <= nobs)
		);
		const levels = table[`${size}`]?.[drivers];
		if (levels) return Object.freeze({ source: 'Narayan 2005', observations: size, levels });
	}
	const levels = pss.F[`${boundsCase}`][drivers] as FBounds['levels'] | undefined;
	if (levels === undefined) return null;
	return Object.freeze({ source: 'Pesaran, Shin & Smith 2001', observations: null, levels });
}

const narayanCase = (boundsCase: 2 | 3 | 4 | 5) =>
	narayan.F[`${boundsCase}`] as unknown as Readonly<Record<string, readonly FBounds['levels'][]>>;

function pValues(F: number, boundsCase: BoundsCase, drivers: number): BoundsTest['FP'] {
	const row = pss.p[`${boundsCase}`][drivers - 1];
	if (!row || !(F > 0)) return null;
	const p = ({ star, small, large }: { star: number; small: number[]; large: number[] }) => {
		const x = Math.log(F);
		return normalSf((F > star ? small : large).reduceRight((sum, c) => sum * x + c, 0));
	};
	return Object.freeze({ I0: p(row.I0), I1: p(row.I1) });
}

/** Reads a statistic that rejects above its bounds. */
export function readFBounds(F: number, [i0, i1]: readonly [number, number]): BoundsReading {
	if (F > i1) return 'rejected';
	return F < i0 ? 'not rejected' : 'inconclusive';
}
