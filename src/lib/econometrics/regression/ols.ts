import type { Design } from '../series/design';
import { isRefusal, refuse, type Refusal } from '../refusal';
import { studentTTwoSided } from '../distributions/student-t';
import { rowSquares } from '../linalg/orthogonal';
import { durbinWatson } from './durbin-watson';
import { leastSquares, type LeastSquares } from './least-squares';
import { scaledConditionNumber } from './condition';

/** A regression with classical inference. Arrays follow the order of `names`. */
export interface OlsFit extends LeastSquares {
	readonly se: Float64Array;
	readonly t: Float64Array;
	/** Two-sided, Student's t with nobs - k degrees of freedom. */
	readonly p: Float64Array;
	readonly sigma: number;
	/** About the mean of y, also without a constant. */
	readonly r2: number;
	readonly adjr2: number;
	readonly loglik: number;
	/** -2 loglik + 2k, + k log n, + 2k log log n: the error variance is not counted. */
	readonly aic: number;
	readonly bic: number;
	readonly hqic: number;
	/** -2 loglik + 2(k+1): the error variance is counted. */
	readonly aicR: number;
	/** Durbin-Watson statistic. */
	readonly dw: number;
	/** Covariance of the coefficients, column-major k x k. */
	readonly vcov: Float64Array;
	/** Of X with columns of unit length, not centred. */
	readonly conditionNumber: number;
	readonly leverage: Float64Array;
}

/** rss <= this share of tss: residuals are rounding, and every test on them is meaningless. */
const PERFECT_FIT = 1e-20;

/**
 * Ordinary least squares with standard errors, p-values and information criteria (Greene 2003, Econometric
 * Analysis, chapters 2 to 4). Refuses what leastSquares refuses, and `perfect-fit`.
 */
export function ols(y: Float64Array, design: Design): OlsFit | Refusal {
	const fit = leastSquares(y, design);
	if (isRefusal(fit)) return fit;
	if (fit.rss <= PERFECT_FIT * fit.tss)
		return refuse(
			'perfect-fit',
			'The regressors reproduce the dependent variable exactly; nothing is left to test.'
		);
	return withInference(fit);
}

function withInference(fit: LeastSquares): OlsFit {
	const { nobs: n, k, rss, tss } = fit;
	const sigma = Math.sqrt(rss / (n - k));
	const vcov = covariance(fit, sigma);
	const se = rowSquares(fit.inverseFactor, k, k).map((square) => sigma * Math.sqrt(square));
	const t = fit.coef.map((b, j) => b / se[j]!);
	const loglik = (-n / 2) * (Math.log(2 * Math.PI) + Math.log(rss / n) + 1);
	return Object.freeze({
		...fit,
		se,
		t,
		p: t.map((value) => studentTTwoSided(value, n - k)),
		sigma,
		r2: 1 - rss / tss,
		adjr2: 1 - rss / (n - k) / (tss / (n - 1)),
		loglik,
		aic: -2 * loglik + 2 * k,
		bic: -2 * loglik + k * Math.log(n),
		hqic: -2 * loglik + 2 * k * Math.log(Math.log(n)),
		aicR: -2 * loglik + 2 * (k + 1),
		dw: durbinWatson(fit.resid),
		vcov,
		conditionNumber: scaledConditionNumber(fit),
		leverage: rowSquares(fit.basis, n, k)
	});
}

/** sigma^2 G G'. */
function covariance(fit: LeastSquares, sigma: number): Float64Array {
	const { k, inverseFactor: g } = fit;
	const v = new Float64Array(k * k);
	for (let i = 0; i < k; i++) {
		for (let j = 0; j <= i; j++) {
			let product = 0;
			for (let c = 0; c < k; c++) product += sigma * g[c * k + i]! * (sigma * g[c * k + j]!);
			v[j * k + i] = product;
			v[i * k + j] = product;
		}
	}
	return v;
}

/** One coefficient by name. */
export interface Coefficient {
	readonly name: string;
	readonly coef: number;
	readonly se: number;
	readonly t: number;
	readonly p: number;
}

/** The coefficient called `name`; undefined when the regression has none of that name. */
export function coefficient(fit: OlsFit, name: string): Coefficient | undefined {
	const j = fit.names.indexOf(name);
	if (j < 0) return undefined;
	return { name, coef: fit.coef[j]!, se: fit.se[j]!, t: fit.t[j]!, p: fit.p[j]! };
}
