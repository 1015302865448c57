import { isRefusal, refuse, type Refusal } from '../refusal';
import { fSf } from '../distributions/f';
import { maxAbs } from '../linalg/vectors';
import { addedColumns } from '../regression/added-columns';
import { isConstant } from '../regression/least-squares';
import type { OlsFit } from '../regression/ols';
import { standardised } from './standardised';

export interface Reset {
	readonly powers: readonly number[];
	readonly f: number;
	readonly fP: number;
	readonly df1: number;
	readonly df2: number;
}

/**
 * Ramsey's RESET. Null: the equation is linear in its regressors. Powers of the fitted values (whole numbers from 2) are
 * added to it (Ramsey 1969, JRSS B 31, 350-371). Refuses `lag` for other powers, `constant`, `too-short`, `rank`.
 */
export function reset(fit: OlsFit, powers: readonly number[] = [2, 3]): Reset | Refusal {
	const { nobs: n, k, rss } = fit;
	const m = powers.length;
	if (m === 0 || powers.some((power) => !Number.isInteger(power) || power < 2))
		return refuse('lag', 'The powers must be whole numbers from 2 upwards.');
	const df2 = n - k - m;
	if (df2 < 1) return refuse('too-short', `${n} rows are too few for ${k} coefficients and ${m} powers.`);
	if (isConstant(fit.fitted)) return refuse('constant', 'The fitted values do not vary.');
	const base = powerBase(fit, powers);
	const added = powers.map((power) => base.map((value) => value ** power));
	const drop = addedColumns(fit, added, 'The powers of the fitted values');
	if (isRefusal(drop)) return drop;
	const f = drop / m / ((rss - drop) / df2);
	return Object.freeze({ powers: Object.freeze([...powers]), f, fP: fSf(f, m, df2), df1: m, df2 });
}

/**
 * The fitted values, centred where that leaves the span of regressors and powers as it is: with a constant, and with
 * every power from 2 upwards. Powers of centred values are far less collinear.
 */
function powerBase(fit: OlsFit, powers: readonly number[]): Float64Array {
	const complete = powers.every((_, i) => powers.includes(i + 2));
	if (fit.intercept >= 0 && complete) return standardised(fit.fitted);
	const size = maxAbs(fit.fitted);
	return fit.fitted.map((value) => value / size);
}
