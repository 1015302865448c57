import { logPoissonMass } from './saddle-point';

/** Both tails of the gamma distribution with shape a at x, as logarithms: P + Q = 1. */
export interface LogTails {
	readonly lower: number;
	readonly upper: number;
}

const MOST_TERMS = 10_000;
const TINY = 1e-300;
const EPSILON = 1.2e-16;

/**
 * log P(a,x) and log Q(a,x), the regularised incomplete gamma functions, a > 0, x >= 0: the power series below
 * a+1, Legendre's continued fraction above (NIST Digital Library of Mathematical Functions 8.11.4, 8.9.2), each the
 * primary of its own side so that the small tail keeps all its digits.
 */
export function incompleteGamma(a: number, x: number): LogTails {
	if (x <= 0) return { lower: -Infinity, upper: 0 };
	if (x === Infinity) return { lower: 0, upper: -Infinity };
	const mass = logPoissonMass(a, x);
	if (x < a + 1) {
		const lower = mass + Math.log(series(a, x));
		return { lower, upper: complement(lower) };
	}
	const upper = mass + Math.log(a * fraction(a, x));
	return { lower: complement(upper), upper };
}

/** log(1 - e^u) for u <= 0, without loss at either end. */
export const complement = (u: number): number =>
	u > -0.6931471805599453 ? Math.log(-Math.expm1(Math.min(u, 0))) : Math.log1p(-Math.exp(u));

/** 1 + x/(a+1) + x^2/((a+1)(a+2)) + ... */
function series(a: number, x: number): number {
	let term = 1;
	let total = 1;
	for (let i = 1; i < MOST_TERMS && term > total * EPSILON; i++) {
		term *= x / (a + i);
		total += term;
	}
	return total;
}

/** 1/(x+1-a- 1(1-a)/(x+3-a- ...)) by the modified Lentz algorithm. */
function fraction(a: number, x: number): number {
	let b = x + 1 - a;
	let c = 1 / TINY;
	let d = 1 / b;
	let value = d;
	for (let i = 1; i < MOST_TERMS; i++) {
		const an = -i * (i - a);
		b += 2;
		d = an * d + b;
		if (Math.abs(d) < TINY) d = TINY;
		c = b + an / c;
		if (Math.abs(c) < TINY) c = TINY;
		d = 1 / d;
		const step = d * c;
		value *= step;
		if (Math.abs(step - 1) < EPSILON) break;
	}
	return value;
}
