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
		3.3871328727963665, 133.14166789178438, 1971.5909503065513, 13731.69376550946, 45921.95393154987,
		67265.7709270087, 33430.57558358813, 2509.0809287301227
	],
	[
		1, 42.31333070160091, 687.1870074920579, 5394.196021424751, 21213.794301586597, 39307.89580009271,
		28729.085735721943, 5226.495278852546
	]
];
const MIDDLE: Rational = [
	[
		1.4234371107496835, 4.630337846156546, 5.769497221460691, 3.6478483247632045, 1.2704582524523684,
		0.2417807251774506, 0.022723844989269184, 0.0007745450142783414
	],
	[
		1, 2.053191626637759, 1.6763848301838038, 0.6897673349851, 0.14810397642748008, 0.015198666563616457,
		0.0005475938084995345, 1.0507500716444169e-9
	]
];
const FAR: Rational = [
	[
		6.657904643501103, 5.463784911164114, 1.7848265399172913, 0.29656057182850487, 0.026532189526576124,
		0.0012426609473880784, 0.000027115555687434876, 2.0103343992922881e-7
	],
	[
		1, 0.599832206555888, 0.1369298809227358, 0.014875361290850615, 0.0007868691311456133,
		0.000018463183175100548, 1.421511758316446e-7, 2.0442631033899397e-15
	]
];
