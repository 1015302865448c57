import { complement, type LogTails } from './incomplete-gamma';
import { logBetaMass } from './saddle-point';

const MOST_TERMS = 10_000;
const TINY = 1e-300;
const EPSILON = 1.2e-16;

/**
 * log I_x(a,b) (`lower`) and log I_y(b,a) (`upper`), the regularised incomplete beta functions; a, b > 0. Both x and
 * y = 1 - x are passed in, never formed by subtraction, so that either may be tiny. Continued fraction (NIST Digital
 * Library of Mathematical Functions 8.17.22) on the side where it converges fast.
 */
export function incompleteBeta(a: number, b: number, x: number, y: number): LogTails {
	if (x <= 0) return { lower: -Infinity, upper: 0 };
	if (y <= 0) return { lower: 0, upper: -Infinity };
	const mass = logBetaMass(a, b, x, y);
	if (x <= (a + 1) / (a + b + 2)) {
		const lower = mass - Math.log(fraction(a, b, x, y));
		return { lower, upper: complement(lower) };
	}
	const upper = mass - Math.log(fraction(b, a, y, x));
	return { lower: complement(upper), upper };
}

/**
 * The fraction whose quotient with x^a y^b / B(a,b) is I_x(a,b), by the modified Lentz algorithm. y enters its terms,
 * so that nothing cancels when x is close to 1 (Didonato & Morris 1992, ACM Trans. Math. Software 18, 360-373).
 */
function fraction(a: number, b: number, x: number, y: number): number {
	const lambda = a * y - b * x + 1;
	let value = guarded((a * lambda) / (a + 1));
	let c = value;
	let d = 0;
	for (let m = 1; m < MOST_TERMS; m++) {
		const odd = a + 2 * m - 1;
		const an = (((a + m - 1) * (a + b + m - 1)) / odd) * ((m * (b - m) * x * x) / odd);
		const bn = m + (m * (b - m) * x) / odd + ((a + m) * (lambda + m * (1 + y))) / (odd + 2);
		d = 1 / guarded(bn + an * d);
		c = guarded(bn + an / c);
		const step = c * d;
		value *= step;
		if (Math.abs(step - 1) < EPSILON) break;
	}
	return value;
}

const guarded = (value: number): number => (Math.abs(value) < TINY ? TINY : value);
