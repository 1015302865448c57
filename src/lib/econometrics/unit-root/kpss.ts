import { refuse, type Refusal } from '../refusal';
import { detrend } from './detrend';
import { hobijnLag, longLag, longRunVariance, shortLag } from './long-run-variance';
import { refuseSeries, toUnitSize } from './usable-series';

export type KpssLag = number | 'short' | 'long' | 'hobijn';

/** Test of the null that a series is stationary around a constant or a trend. */
export interface Kpss {
	readonly det: 'c' | 'ct';
	readonly lag: number;
	readonly lagRule: 'given' | 'short' | 'long' | 'hobijn';
	readonly nobs: number;
	/** A value above the critical one rejects stationarity. */
	readonly stat: number;
	/** Interpolated between the tabulated levels, never outside 0.01 to 0.1. */
	readonly pvalue: number;
	/** `>` when the p-value lies above 0.1, `<` when below 0.01, null when it is the interpolated figure. */
	readonly bracket: '>' | '<' | null;
	readonly critical: KpssCritical;
}

export interface KpssCritical {
	readonly '10%': number;
	readonly '5%': number;
	readonly '2.5%': number;
	readonly '1%': number;
}

/** Kwiatkowski, Phillips, Schmidt & Shin (1992) J. Econometrics 54, 159-178, table 1. */
const CRITICAL: Readonly<Record<'c' | 'ct', KpssCritical>> = Object.freeze({
	c: Object.freeze({ '10%': 0.347, '5%': 0.463, '2.5%': 0.574, '1%': 0.739 }),
	ct: Object.freeze({ '10%': 0.119, '5%': 0.146, '2.5%': 0.176, '1%': 0.216 })
});

/** KPSS statistic of `v`; lags by number, by rule of the sample size, or by the data (Hobijn, Franses & Ooms). */
export function kpss(
	v: Float64Array,
	{ det, lag }: { readonly det: 'c' | 'ct'; readonly lag: KpssLag }
): Kpss | Refusal {
	const refusal = refuseSeries(v);
	if (refusal) return refusal;
	const nobs = v.length;
	const e = detrend(toUnitSize(v).values, det);
	const chosen = chooseLag(e, lag);
	if (!Number.isInteger(chosen) || chosen < 0 || chosen >= nobs)
		return refuse('lag', `truncation lag ${chosen} of ${nobs} observations`);
	const variance = longRunVariance(e, chosen);
	if (!(variance > 0)) return refuse('no-variance', `the long-run variance at lag ${chosen} is not positive`);
	let partial = 0;
	let squares = 0;
	for (let t = 0; t < nobs; t++) {
		partial += e[t]!;
		squares += partial * partial;
	}
	const stat = squares / (nobs * nobs) / variance;
	return Object.freeze({
		det,
		lag: chosen,
		lagRule: typeof lag === 'number' ? 'given' : lag,
		nobs,
		stat,
		...interpolate(stat, CRITICAL[det]),
		critical: CRITICAL[det]
	});
}

function chooseLag(e: Float64Array, lag: KpssLag): number {
	if (lag === 'short') return shortLag(e.length);
	if (lag === 'long') return longLag(e.length);
	return lag === 'hobijn' ? hobijnLag(e) : lag;
}

function interpolate(stat: number, critical: KpssCritical): Pick<Kpss, 'pvalue' | 'bracket'> {
	const points: readonly (readonly [number, number])[] = [
		[critical['10%'], 0.1],
		[critical['5%'], 0.05],
		[critical['2.5%'], 0.025],
		[critical['1%'], 0.01]
	];
	if (stat < points[0]![0]) return { pvalue: 0.1, bracket: '>' };
	for (let i = 1; i < points.length; i++) {
		const [x0, p0] = points[i - 1]!;
		const [x1, p1] = points[i]!;
		if (stat <= x1) return { pvalue: p0 + ((p1 - p0) * (stat - x0)) / (x1 - x0), bracket: null };
	}
	return { pvalue: 0.01, bracket: '<' };
}
