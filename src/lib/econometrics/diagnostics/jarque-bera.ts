import { refuse, type Refusal } from '../refusal';
import { chiSquareSf } from '../distributions/chi-square';
import { centred, maxAbs } from '../linalg/vectors';
import { isConstant } from '../regression/least-squares';

export interface JarqueBera {
	readonly jb: number;
	readonly p: number;
	readonly skew: number;
	/** 3 for a normal distribution. */
	readonly kurt: number;
}

/**
 * Jarque-Bera test. Null: normal errors. n/6 (S^2 + (K-3)^2/4) with moments about the mean, divisor n; chi-square with
 * 2 degrees of freedom, a poor guide under n = 100 (Jarque & Bera 1987, International Statistical Review 55, 163-172).
 * Refuses `constant`.
 */
export function jarqueBera(resid: Float64Array): JarqueBera | Refusal {
	if (isConstant(resid)) return refuse('constant', 'The residuals do not vary.');
	const n = resid.length;
	const deviations = centred(resid);
	const scale = maxAbs(deviations);
	const moment = (power: number): number => {
		let sum = 0;
		for (const d of deviations) sum += (d / scale) ** power;
		return sum / n;
	};
	const variance = moment(2);
	const skew = moment(3) / variance ** 1.5;
	const kurt = moment(4) / variance ** 2;
	const jb = (n / 6) * (skew ** 2 + (kurt - 3) ** 2 / 4);
	return Object.freeze({ jb, p: chiSquareSf(jb, 2), skew, kurt });
}
