import { incompleteGamma } from './incomplete-gamma';

/** The standard normal distribution. */

const LOG_2 = 0.6931471805599453;
const LOG_SQRT_2PI = 0.9189385332046727;

/** log P(Z > z): half of Q(1/2, z^2/2) for z > 0 (NIST Digital Library of Mathematical Functions 7.11.2). */
export function normalLogSf(z: number): number {
	if (z === 0) return -LOG_2;
	if (z > 0) return incompleteGamma(0.5, (z * z) / 2).upper - LOG_2;
	return Math.log1p(-Math.exp(incompleteGamma(0.5, (z * z) / 2).upper - LOG_2));
}

/** P(Z > z). */
export function normalSf(z: number): number {
	if (z === 0) return 0.5;
	const tail = Math.exp(incompleteGamma(0.5, (z * z) / 2).upper) / 2;
	return z > 0 ? tail : 1 - tail;
}

/** P(Z <= z). */
export const normalCdf = (z: number): number => normalSf(-z);

/** The z with P(Z > z) = q: Wichura's AS 241 (1988, Applied Statistics 37, 477-484) and one Halley step. */
export function normalUpperQuantile(q: number): number {
	if (q === 0.5) return 0;
	if (q > 0.5) return q >= 1 ? -Infinity : -normalUpperQuantile(1 - q);
	if (q <= 0) return Infinity;
	const z = -approximate(q);
	// g = log sf(z) - log q, g' = -hazard, g'' = hazard (z - hazard).
	const logTail = normalLogSf(z);
	const hazard = Math.exp(-(z * z) / 2 - LOG_SQRT_2PI - logTail);
	const newton = -(logTail - Math.log(q)) / hazard;
	return z - newton / (1 - (newton * (z - hazard)) / 2);
}

/** The z with P(Z <= z) = p. */
export const normalQuantile = (p: number): number => (p === 0.5 ? 0 : -normalUpperQuantile(p));

/** AS 241, routine PPND16: the lower quantile for p < 1/2. */
function approximate(p: number): number {
	const q = p - 0.5;
	if (q >= -0.425) return q * ratio(CENTRE, 0.180625 - q * q);
	const r = Math.sqrt(-Math.log(p));
	return r <= 5 ? -ratio(MIDDLE, r - 1.6) : -ratio(FAR, r - 5);
}

type Rational = readonly [numerator: readonly number[], denominator: readonly number[]];

const ratio = ([numerator, denominator]: Rational, r: number): number =>
	polynomial(numerator, r) / polynomial(denominator, r);

/** Coefficients in ascending powers. */
const polynomial = (coefficients: readonly number[], r: number): number =>
	coefficients.reduceRight((value, c) => value * r + c, 0);

const CENTRE: Rational = [
	[
		3.387132872796366608, 133.14166789178437745, 1971.5909503065514427, 13731.693765509461125,
		45921.953931549871457, 67265.770927008700853, 33430.575583588128105, 2509.0809287301226727
	],
	[
		1, 42.313330701600911252, 687.1870074920579083, 5394.1960214247511077, 21213.794301586595867,
		39307.89580009271061, 28729.085735721942674, 5226.495278852545925
	]
];
const MIDDLE: Rational = [
	[
		1.42343711074968357734, 4.6303378461565452959, 5.7694972214606914055, 3.64784832476320460504,
		1.27045825245236838258, 0.24178072517745061177, 0.0227238449892691845833, 7.7454501427834140764e-4
	],
	[
		1, 2.05319162663775882187, 1.6763848301838038494, 0.68976733498510000455, 0.14810397642748007459,
		0.0151986665636164571966, 5.475938084995344946e-4, 1.05075007164441684324e-9
	]
];
const FAR: Rational = [
	[
		6.6579046435011037772, 5.4637849111641143699, 1.7848265399172913358, 0.29656057182850489123,
		0.026532189526576123093, 0.0012426609473880784386, 2.71155556874348757815e-5, 2.01033439929228813265e-7
	],
	[
		1, 0.59983220655588793769, 0.13692988092273580531, 0.0148753612908506148525, 7.868691311456132591e-4,
		1.8463183175100546818e-5, 1.4215117583164458887e-7, 2.04426310338993978564e-15
	]
];
