import { isRefusal, refuse, type Refusal } from '../refusal';
import { chiSquareSf } from '../distributions/chi-square';
import { fSf } from '../distributions/f';
import type { OlsFit } from '../regression/ols';
import { designOf } from '../series/design';
import { constant } from '../series/deterministic';
import { explain, scaledSquares } from './squared-residuals';

export interface BreuschPagan {
	/** Koenker's studentised form, n R^2: the one to judge. */
	readonly koenker: number;
	readonly koenkerP: number;
	/** Breusch & Pagan's form: half the explained sum of squares; needs normal errors. */
	readonly bp: number;
	readonly bpP: number;
	readonly f: number;
	readonly fP: number;
	readonly df: number;
	readonly df2: number;
}

/**
 * Breusch-Pagan test. Null: the error variance does not depend on the regressors (Breusch & Pagan 1979, Econometrica
 * 47, 1287-1294; Koenker 1981, Journal of Econometrics 17, 107-112). Refuses `constant` when there is no regressor
 * beside the constant, or when the squared residuals do not vary.
 */
export function breuschPagan(fit: OlsFit): BreuschPagan | Refusal {
	const { nobs: n, design, intercept } = fit;
	const others = design.names
		.map((name, j) => ({ name, column: design.columns[j]! }))
		.filter((_, j) => j !== intercept);
	const df = others.length;
	if (df === 0) return refuse('constant', 'There is no regressor on which the variance could depend.');
	const aux = explain(scaledSquares(fit.resid), designOf([constant(n), ...others]));
	if (isRefusal(aux)) return aux;
	const df2 = n - df - 1;
	const koenker = n * aux.r2;
	const bp = aux.explained / 2;
	const f = aux.r2 / df / ((1 - aux.r2) / df2);
	return Object.freeze({
		koenker,
		koenkerP: chiSquareSf(koenker, df),
		bp,
		bpP: chiSquareSf(bp, df),
		f,
		fP: fSf(f, df, df2),
		df,
		df2
	});
}
