import { isRefusal, refuse, type Refusal } from '../refusal';
import { mean } from '../linalg/vectors';
import { leastSquares } from '../regression/least-squares';
import { constant } from '../series/deterministic';
import { designOf } from '../series/design';

/** Cumulated deviations of a held gap from its mean before approval, watched period by period. */
export interface GapBoundary {
	/** Periods before approval. */
	readonly known: number;
	/** Cumulated standardised deviation after 1, 2, .. new periods. */
	readonly path: Float64Array;
	readonly lines: readonly BoundaryLine[];
	/** Long-run standard deviation of the gap before approval. */
	readonly omega: number;
	/** First-order autocorrelation behind omega, at most 0.97. */
	readonly persistence: number;
}

export interface BoundaryLine {
	/** Chance of ever crossing while nothing changes. */
	readonly level: number;
	readonly boundary: Float64Array;
	/** First new period (from 1) outside, null when none is. */
	readonly crossed: number | null;
}

const MOST_PERSISTENT = 0.97;
const LEAST_KNOWN = 10;

/**
 * Watches a gap with held coefficients after the first `known` periods: a relation that has moved leaves the gap on
 * one side. The boundary is one that can be looked at every period, with scale `scale` (two years of periods is
 * usual): crossing when |B_j| > sqrt((1 + j/known) (j + scale) (a^2 + ln((j + scale)/scale))), a^2 = -2 ln level. After
 * Chu, Stinchcombe & White (1996) Econometrica 64, 1045-1065.
 */
export function gapBoundary(
	gap: Float64Array,
	{
		known,
		scale,
		levels
	}: { readonly known: number; readonly scale: number; readonly levels: readonly number[] }
): GapBoundary | Refusal {
	const fresh = gap.length - known;
	if (fresh < 1) return refuse('too-short', 'there is no period after approval yet');
	if (known < LEAST_KNOWN)
		return refuse('too-short', `${known} periods before approval; at least ${LEAST_KNOWN} are needed`);
	const before = gap.slice(0, known);
	const spread = longRunSpread(before);
	if (isRefusal(spread)) return spread;
	const level = mean(before);
	const path = new Float64Array(fresh);
	let sum = 0;
	for (let j = 0; j < fresh; j++) {
		sum += (gap[known + j]! - level) / spread.omega;
		path[j] = sum;
	}
	return Object.freeze({
		known,
		path,
		lines: levels.map((chance) => lineOf(path, chance, known, scale)),
		...spread
	});
}

function lineOf(path: Float64Array, level: number, known: number, scale: number): BoundaryLine {
	const boundary = path.map((_, i) => {
		const j = i + 1;
		return Math.sqrt((1 + j / known) * (j + scale) * (-2 * Math.log(level) + Math.log((j + scale) / scale)));
	});
	const first = path.findIndex((value, i) => Math.abs(value) > boundary[i]!);
	return Object.freeze({ level, boundary, crossed: first < 0 ? null : first + 1 });
}

/** s / (1 - phi) of a first-order autoregression with constant. */
function longRunSpread(gap: Float64Array): { omega: number; persistence: number } | Refusal {
	const rows = gap.length - 1;
	const fit = leastSquares(
		gap.slice(1),
		designOf([constant(rows), { name: 'gap.l1', column: gap.slice(0, rows) }])
	);
	if (isRefusal(fit)) return fit;
	const persistence = Math.min(fit.coef[1]!, MOST_PERSISTENT);
	const omega = Math.sqrt(fit.rss / (rows - 2)) / (1 - persistence);
	return omega > 0 ? { omega, persistence } : refuse('no-variance', 'the gap before approval does not vary');
}
