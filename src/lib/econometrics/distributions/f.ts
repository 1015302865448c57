import { incompleteBeta } from './incomplete-beta';
import { logBetaMass } from './saddle-point';
import { solveTail } from './solve-tail';

/** The F distribution with df1, df2 > 0 degrees of freedom (NIST Digital Library of Mathematical Functions 8.17). */

/** Share of the second and of the first part, d2/(d2+d1 f) and d1 f/(d2+d1 f), each formed on its own. */
function shares(f: number, df1: number, df2: number): { second: number; first: number } {
	const ratio = (df1 * f) / df2;
	return { second: 1 / (1 + ratio), first: ratio < 1 ? ratio / (1 + ratio) : 1 / (1 + 1 / ratio) };
}

function tails(f: number, df1: number, df2: number): { lower: number; upper: number } {
	if (f <= 0) return { lower: -Infinity, upper: 0 };
	const { second, first } = shares(f, df1, df2);
	const beta = incompleteBeta(df2 / 2, df1 / 2, second, first);
	return { lower: beta.upper, upper: beta.lower };
}

/** P(X <= f). */
export const fCdf = (f: number, df1: number, df2: number): number => Math.exp(tails(f, df1, df2).lower);

/** P(X > f). */
export const fSf = (f: number, df1: number, df2: number): number => Math.exp(tails(f, df1, df2).upper);

/** log P(X > f). */
export const fLogSf = (f: number, df1: number, df2: number): number => tails(f, df1, df2).upper;

/** The f with P(X > f) = q. */
export function fUpperQuantile(q: number, df1: number, df2: number): number {
	if (q <= 0) return Infinity;
	if (q >= 1) return 0;
	return q <= 0.5 ? root(q, 'upper', df1, df2) : root(1 - q, 'lower', df1, df2);
}

/** The f with P(X <= f) = p. */
export function fQuantile(p: number, df1: number, df2: number): number {
	if (p <= 0) return 0;
	if (p >= 1) return Infinity;
	return p <= 0.5 ? root(p, 'lower', df1, df2) : root(1 - p, 'upper', df1, df2);
}

function root(probability: number, side: 'lower' | 'upper', df1: number, df2: number): number {
	return solveTail(Math.log(probability), side === 'upper' ? -1 : 1, 1, (f) => {
		const { second, first } = shares(f, df1, df2);
		return {
			logTail: tails(f, df1, df2)[side],
			logDensity: logBetaMass(df2 / 2, df1 / 2, second, first)
		};
	});
}
