import { isRefusal, refuse, type Refusal } from '../refusal';
import { centred } from '../linalg/vectors';
import { projectOff } from '../linalg/orthogonal';
import { mulberry32 } from '../random/mulberry32';
import { leastSquares } from '../regression/least-squares';
import { designOf } from '../series/design';
import { difference } from '../series/lags';
import { dickeyFuller } from '../unit-root/adf';
import { leadingRss, sequentialFit } from '../unit-root/sequential-fit';
import { staticDesign, type StaticModel } from './engle-granger';
import { quantile } from './quantile';
import { SmallRegression } from './small-regression';

export interface BootstrapOptions {
	/** Order of the autoregression of the residual changes, and lags of the test. */
	readonly lags: number;
	readonly replications: number;
	readonly seed: number;
	/** `wild` keeps the size of each residual and draws its sign: for errors of changing variance. */
	readonly scheme: 'iid' | 'wild';
}

/** Engle-Granger test whose distribution is drawn under the null with the drivers and dummies as observed. */
export interface BootstrapEngleGranger extends BootstrapOptions {
	readonly stat: number;
	/** Autoregression of the residual changes. */
	readonly gamma: readonly number[];
	/** Replications with a statistic not above the observed one. */
	readonly atMost: number;
	/** (1 + atMost) / (replications + 1). */
	readonly pvalue: number;
	readonly critical: { readonly '1%': number; readonly '5%': number; readonly '10%': number };
	readonly statistics: Float64Array;
	/** Uniform numbers taken from the seed. */
	readonly draws: number;
}

/**
 * Sieve bootstrap of the Engle-Granger test: changes of the static residuals follow an autoregression, its
 * residuals are drawn, the cumulated path is regressed on the same relation again. Chang & Park (2003) J. Time
 * Series Analysis 24, 379-400; wild: Cavaliere & Taylor (2008) Econometric Theory 24, 43-71.
 */
export function bootstrapEngleGranger(
	model: StaticModel,
	options: BootstrapOptions
): BootstrapEngleGranger | Refusal {
	const { lags, replications, seed, scheme } = options;
	if (!Number.isInteger(replications) || replications < 1)
		return refuse('domain', `${replications} is not a number of replications`);
	const fit = leastSquares(model.y, staticDesign(model));
	if (isRefusal(fit)) return fit;
	const test = dickeyFuller(fit.resid, 'n', lags);
	if (isRefusal(test)) return test;
	const sieve = fitSieve(fit.resid, lags);
	if (isRefusal(sieve)) return sieve;
	const { gamma, resid } = sieve;
	const uniform = mulberry32(seed);
	const draw =
		scheme === 'wild'
			? (i: number) => (uniform() < 0.5 ? -resid[i]! : resid[i]!)
			: () => resid[Math.floor(resid.length * uniform())]!;
	const path = new Float64Array(model.y.length);
	const regression = new SmallRegression(test.nobs, lags + 1);
	const statistics = Float64Array.from({ length: replications }, () => {
		simulatePath(path, fit.resid, gamma, draw);
		projectOff(fit.basis, fit.nobs, fit.k, path);
		return dickeyFullerT(path, lags, regression);
	});
	const atMost = statistics.filter((value) => value <= test.stat).length;
	return Object.freeze({
		...options,
		stat: test.stat,
		gamma: Object.freeze(Array.from(gamma)),
		atMost,
		pvalue: (1 + atMost) / (replications + 1),
		critical: Object.freeze({
			'1%': quantile(statistics, 0.01),
			'5%': quantile(statistics, 0.05),
			'10%': quantile(statistics, 0.1)
		}),
		statistics,
		draws: replications * resid.length
	});
}

/** Changes of `u` on their own lags without a constant; the residuals are centred. */
function fitSieve(u: Float64Array, lags: number): { gamma: Float64Array; resid: Float64Array } | Refusal {
	const du = difference(u);
	const y = du.slice(lags);
	if (lags === 0) return { gamma: new Float64Array(0), resid: centred(y) };
	const fit = leastSquares(y, designOf(lagColumns(du, lags, lags)));
	return isRefusal(fit) ? fit : { gamma: fit.coef, resid: centred(fit.resid) };
}

function lagColumns(du: Float64Array, lags: number, from: number) {
	return Array.from({ length: lags }, (_, l) => ({
		name: `lag ${l + 1}`,
		column: du.slice(from - l - 1, du.length - l - 1)
	}));
}

/** The observed start, then changes from the autoregression and drawn residuals, cumulated. */
function simulatePath(
	path: Float64Array,
	observed: Float64Array,
	gamma: Float64Array,
	draw: (i: number) => number
): void {
	const p = gamma.length;
	for (let t = 0; t <= p; t++) path[t] = observed[t]!;
	for (let t = p + 1; t < path.length; t++) {
		let change = draw(t - p - 1);
		for (let i = 0; i < p; i++) change += gamma[i]! * (path[t - 1 - i]! - path[t - 2 - i]!);
		path[t] = path[t - 1]! + change;
	}
}

/** t-ratio of the level in the Dickey-Fuller regression of `u` without deterministic terms. */
function dickeyFullerT(u: Float64Array, lags: number, regression: SmallRegression): number {
	const rows = u.length - 1 - lags;
	const change = new Float64Array(rows);
	for (let r = 0; r < rows; r++) change[r] = u[lags + r + 1]! - u[lags + r]!;
	for (let l = 1; l <= lags; l++) {
		const column = regression.column(l - 1);
		for (let r = 0; r < rows; r++) column[r] = u[lags + r + 1 - l]! - u[lags + r - l]!;
	}
	regression.column(lags).set(u.subarray(lags, lags + rows));
	return regression.solve(change, rows - lags - 1).t;
}

/** Order of the autoregression by BIC over 0 .. floor(4 (T/100)^(1/4)) on one sample. */
export function sieveOrder(gap: Float64Array): number | Refusal {
	const du = difference(gap);
	const most = Math.floor(4 * Math.sqrt(Math.sqrt(gap.length / 100)));
	if (most === 0) return 0;
	const columns = lagColumns(du, most, most);
	const fit = sequentialFit(
		du.slice(most),
		columns.map((c) => c.column),
		columns.map((c) => c.name)
	);
	if (isRefusal(fit)) return fit;
	const bic = Array.from(
		{ length: most + 1 },
		(_, p) => fit.nobs * Math.log(leadingRss(fit, p) / fit.nobs) + p * Math.log(fit.nobs)
	);
	return bic.indexOf(Math.min(...bic));
}
