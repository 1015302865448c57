import { gammaCdf, gammaLogSf, gammaQuantile, gammaSf, gammaUpperQuantile } from './gamma';

/** The chi-square distribution with df > 0 degrees of freedom: a gamma of shape df/2 and scale 2. */

/** P(X <= x). */
export const chiSquareCdf = (x: number, df: number): number => gammaCdf(x, df / 2, 2);

/** P(X > x). */
export const chiSquareSf = (x: number, df: number): number => gammaSf(x, df / 2, 2);

/** log P(X > x). */
export const chiSquareLogSf = (x: number, df: number): number => gammaLogSf(x, df / 2, 2);

/** The x with P(X <= x) = p. */
export const chiSquareQuantile = (p: number, df: number): number => gammaQuantile(p, df / 2, 2);

/** The x with P(X > x) = q. */
export const chiSquareUpperQuantile = (q: number, df: number): number => gammaUpperQuantile(q, df / 2, 2);
