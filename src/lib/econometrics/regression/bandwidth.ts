import { isRefusal, refuse, type Refusal } from '../refusal';
import { designOf } from '../series/design';
import { constant } from '../series/deterministic';
import { norm } from '../linalg/vectors';
import { leastSquares } from './least-squares';
import type { OlsFit } from './ols';

/** Truncation lags that the data or n suggest for a Bartlett window; the last two are real numbers. */
export interface Bandwidths {
	/** floor(4 (n/100)^(2/9)). */
	readonly ruleOfThumb: number;
	/** floor(0.75 n^(1/3)). */
	readonly cubeRoot: number;
	/** Andrews (1991), Econometrica 59, 817-858: an AR(1) for each score. */
	readonly andrews: number;
	/** Newey & West (1994), Review of Economic Studies 61, 631-653. */
	readonly neweyWest1994: number;
}

/** floor(4 (n/100)^(2/9)), the usual rule of thumb. */
export const ruleOfThumbLag = (n: number): number => Math.floor(4 * (n / 100) ** (2 / 9));

/** floor(0.75 n^(1/3)), as in textbooks (Stock & Watson). */
export const cubeRootLag = (n: number): number => Math.floor(0.75 * n ** (1 / 3));

/** The whole truncation lag of a real bandwidth: rounded down, at most a third of the rows. */
export const truncationLag = (bandwidth: number, n: number): number =>
	Math.min(Math.floor(bandwidth), Math.floor(n / 3));

/** Near a unit root the AR(1) plug-in explodes; Andrews & Monahan (1992), Econometrica 60, 953-966, cap it there. */
const LARGEST_RHO = 0.97;

/** The four truncation lags for the scores of a regression. Refuses `too-short` and `no-variance`. */
export function bandwidths(fit: OlsFit): Bandwidths | Refusal {
	const n = fit.nobs;
	if (n < 4) return refuse('too-short', `${n} rows are too few for a bandwidth.`);
	const scores = judgedScores(fit);
	const andrews = andrewsBandwidth(scores, n);
	const neweyWest1994 = neweyWestBandwidth(scores, n);
	if (!Number.isFinite(andrews) || !Number.isFinite(neweyWest1994))
		return refuse('no-variance', 'The long-run variance of the scores is 0; no bandwidth follows from it.');
	return Object.freeze({ ruleOfThumb: ruleOfThumbLag(n), cubeRoot: cubeRootLag(n), andrews, neweyWest1994 });
}

/** x_t e_t for every column but the constant; for the constant when there is nothing else. */
function judgedScores(fit: OlsFit): Float64Array[] {
	const others = fit.design.columns.filter((_, j) => j !== fit.intercept);
	const judged = others.length > 0 ? others : fit.design.columns;
	const unit = norm(fit.resid);
	return judged.map((column) => column.map((x, t) => (x * fit.resid[t]!) / unit));
}

function andrewsBandwidth(scores: readonly Float64Array[], n: number): number {
	let numerator = 0;
	let denominator = 0;
	for (const u of scores) {
		const design = designOf([constant(n - 1), { name: 'u.l1', column: u.slice(0, -1) }]);
		const ar = leastSquares(u.slice(1), design);
		// A score of zeros, as a pulse dummy has, carries no weight.
		if (isRefusal(ar)) continue;
		const rho = Math.max(-LARGEST_RHO, Math.min(LARGEST_RHO, ar.coef[1]!));
		const variance = ar.rss / (n - 1);
		numerator += (4 * rho ** 2 * variance ** 2) / ((1 - rho) ** 6 * (1 + rho) ** 2);
		denominator += variance ** 2 / (1 - rho) ** 4;
	}
	return 1.1447 * ((n * numerator) / denominator) ** (1 / 3);
}

function neweyWestBandwidth(scores: readonly Float64Array[], n: number): number {
	const h = new Float64Array(n);
	for (const u of scores) for (let t = 0; t < n; t++) h[t]! += u[t]!;
	let s0 = 0;
	let s1 = 0;
	for (let j = 0; j <= ruleOfThumbLag(n); j++) {
		let s = 0;
		for (let t = j; t < n; t++) s += (h[t]! * h[t - j]!) / n;
		s0 += j === 0 ? s : 2 * s;
		s1 += 2 * j * s;
	}
	return 1.1447 * ((s1 / s0) ** 2) ** (1 / 3) * n ** (1 / 3);
}
