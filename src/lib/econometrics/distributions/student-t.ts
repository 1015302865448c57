import { incompleteBeta } from './incomplete-beta';
import { logBetaMass } from './saddle-point';
import { normalUpperQuantile } from './normal';
import { solveTail } from './solve-tail';

/** Student's t distribution with df > 0 degrees of freedom (NIST Digital Library of Mathematical Functions 8.17). */

const LOG_2 = 0.6931471805599453;

/** log P(T > t) for t > 0: half of I_x(df/2, 1/2) at x = df/(df+t^2). */
function logUpperTail(t: number, df: number): number {
	const { x, y } = partsOf(t, df);
	return incompleteBeta(df / 2, 0.5, x, y).lower - LOG_2;
}

/** x = df/(df+t^2) and y = t^2/(df+t^2), each formed on its own. */
function partsOf(t: number, df: number): { x: number; y: number } {
	const ratio = t / Math.sqrt(df);
	const square = ratio * ratio;
	return { x: 1 / (1 + square), y: ratio < 1 ? square / (1 + square) : 1 / (1 + 1 / square) };
}

/** P(T > t). */
export function studentTSf(t: number, df: number): number {
	if (t === 0) return 0.5;
	return t > 0 ? Math.exp(logUpperTail(t, df)) : 1 - Math.exp(logUpperTail(-t, df));
}

/** P(T <= t). */
export const studentTCdf = (t: number, df: number): number => studentTSf(-t, df);

/** log P(T > t). */
export function studentTLogSf(t: number, df: number): number {
	if (t === 0) return -LOG_2;
	return t > 0 ? logUpperTail(t, df) : Math.log1p(-Math.exp(logUpperTail(-t, df)));
}

/** P(|T| > |t|). */
export const studentTTwoSided = (t: number, df: number): number =>
	t === 0 ? 1 : Math.exp(logUpperTail(Math.abs(t), df) + LOG_2);

/** The t with P(T > t) = q. */
export function studentTUpperQuantile(q: number, df: number): number {
	if (q === 0.5) return 0;
	if (q > 0.5) return q >= 1 ? -Infinity : -studentTUpperQuantile(1 - q, df);
	if (q <= 0) return Infinity;
	return solveTail(Math.log(q), -1, normalUpperQuantile(q), (t) => {
		const { x, y } = partsOf(t, df);
		return { logTail: logUpperTail(t, df), logDensity: logBetaMass(df / 2, 0.5, x, y) };
	});
}

/** The t with P(T <= t) = p. */
export function studentTQuantile(p: number, df: number): number {
	if (p === 0.5) return 0;
	return p < 0.5 ? -studentTUpperQuantile(p, df) : studentTUpperQuantile(1 - p, df);
}
