import { refuse, type Refusal } from '../refusal';
import { chiSquareSf } from '../distributions/chi-square';
import { isConstant } from '../regression/least-squares';
import { autocorrelations } from './autocorrelations';

export interface LjungBox {
	readonly lags: number;
	/** Degrees of freedom: lags less the number of estimated dynamic coefficients. */
	readonly df: number;
	readonly lb: number;
	readonly lbP: number;
	/** Box & Pierce's statistic. */
	readonly bp: number;
	readonly bpP: number;
	/** Autocorrelations at lags 1 .. lags. */
	readonly acf: Float64Array;
}

/**
 * Ljung-Box and Box-Pierce tests. Null: no autocorrelation up to `lags` (Ljung & Box 1978, Biometrika 65, 297-303; Box &
 * Pierce 1970, JASA 65, 1509-1526). With a lagged dependent variable the chi-square is only a guide. Refuses `lag`
 * and `constant`.
 */
export function ljungBox(resid: Float64Array, lags: number, fitDf = 0): LjungBox | Refusal {
	const n = resid.length;
	if (!Number.isInteger(lags) || lags < 1 || lags >= n)
		return refuse('lag', `${lags} lags are not possible with ${n} residuals.`);
	const df = lags - fitDf;
	if (df < 1) return refuse('lag', `${lags} lags leave no degree of freedom after ${fitDf} coefficients.`);
	if (isConstant(resid)) return refuse('constant', 'The residuals do not vary.');
	const acf = autocorrelations(resid, lags);
	let lb = 0;
	let bp = 0;
	for (let l = 1; l <= lags; l++) {
		lb += (n * (n + 2) * acf[l - 1]! ** 2) / (n - l);
		bp += n * acf[l - 1]! ** 2;
	}
	return Object.freeze({ lags, df, lb, lbP: chiSquareSf(lb, df), bp, bpP: chiSquareSf(bp, df), acf });
}
