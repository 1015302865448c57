import { isRefusal, refuse, type Refusal } from '../refusal';
import { adf, type Adf } from './adf';
import { adfRegression } from './adf-regression';
import type { Deterministic } from './mackinnon';
import { leadingRss, sequentialFit } from './sequential-fit';
import { refuseSeries, toUnitSize } from './usable-series';

export type LagRule = 'AIC' | 'BIC' | 'tsig';

/** How many lagged differences a Dickey-Fuller regression was given, and why. */
export interface LagSearch {
	readonly rule: LagRule;
	readonly maxLag: number;
	readonly selected: number;
	/** The criterion at 0, 1, .. lags on the common sample; null for the sequential t rule. */
	readonly criteria: readonly number[] | null;
}

export type AdfAuto = Adf & { readonly search: LagSearch };

interface SearchOptions {
	readonly det: Deterministic;
	readonly rule: LagRule;
	readonly maxLag: number;
}

/** Two-sided 10 % point of the normal distribution: the sequential rule keeps a last lag beyond it. */
const TEN_PERCENT = 1.6448536269514722;

/**
 * Schwert's rule min(ceil(12 (T/100)^(1/4)), floor(T/3) - 2), never above `cap` (a policy figure; 8 quarterly and
 * 12 monthly are usual) nor below 0. Schwert (1989) J. Business & Economic Statistics 7, 147-159.
 */
export const defaultMaxLag = (observations: number, cap: number): number =>
	Math.max(
		0,
		Math.min(cap, Math.ceil(12 * Math.sqrt(Math.sqrt(observations / 100))), Math.floor(observations / 3) - 2)
	);

/**
 * Dickey-Fuller test with the lag order chosen on the common sample of all orders up to `maxLag`, then estimated
 * again on its own full sample. Ng & Perron (1995) JASA 90, 268-281.
 */
export function adfAuto(v: Float64Array, options: SearchOptions): AdfAuto | Refusal {
	const search = searchLags(v, options);
	if (isRefusal(search)) return search;
	const test = adf(v, { det: options.det, lags: search.selected });
	return isRefusal(test) ? test : Object.freeze({ ...test, search });
}

/** The lag order of a Dickey-Fuller regression, from one factorisation for all orders. */
export function searchLags(v: Float64Array, { det, rule, maxLag }: SearchOptions): LagSearch | Refusal {
	if (!Number.isInteger(maxLag) || maxLag < 0) return refuse('lag', `${maxLag} is not a number of lags`);
	if (maxLag >= v.length - 1) return refuse('lag', `${maxLag} lags of ${v.length} observations`);
	const refusal = refuseSeries(v);
	if (refusal) return refusal;
	const { values, logScale } = toUnitSize(v);
	const regression = adfRegression(values, det, maxLag, maxLag);
	const columns = [...regression.deterministic, regression.level, ...regression.lags];
	const fit = sequentialFit(
		regression.y,
		columns.map((c) => c.values),
		columns.map((c) => c.name)
	);
	if (isRefusal(fit)) return fit;
	const base = columns.length - maxLag;
	const rss = Array.from({ length: maxLag + 1 }, (_, p) => leadingRss(fit, base + p));
	if (rule === 'tsig') {
		const selected = lastSignificantLag(rss, (p) => fit.coordinates[base + p - 1]!, fit.nobs, base);
		return Object.freeze({ rule, maxLag, selected, criteria: null });
	}
	const criteria = rss.map((value, p) =>
		criterion(rule, Math.log(value / fit.nobs) + 2 * logScale, fit.nobs, base + p)
	);
	return Object.freeze({
		rule,
		maxLag,
		selected: criteria.indexOf(Math.min(...criteria)),
		criteria: Object.freeze(criteria)
	});
}

function criterion(rule: 'AIC' | 'BIC', logVariance: number, n: number, k: number): number {
	const minusTwoLogLik = n * (Math.log(2 * Math.PI) + logVariance + 1);
	return minusTwoLogLik + k * (rule === 'AIC' ? 2 : Math.log(n));
}

/** From the largest order down, the first whose last lag is significant at 10 %. */
function lastSignificantLag(
	rss: readonly number[],
	coordinate: (p: number) => number,
	n: number,
	base: number
): number {
	for (let p = rss.length - 1; p >= 1; p--) {
		const sigma = Math.sqrt(rss[p]! / (n - base - p));
		if (Math.abs(coordinate(p)) / sigma >= TEN_PERCENT) return p;
	}
	return 0;
}
