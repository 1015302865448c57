/**
 * Poisson and binomial masses at real arguments by the saddle-point form of C. Loader (2000), "Fast and accurate
 * computation of binomial probabilities": the prefactors of the incomplete gamma and beta functions without the
 * cancellation between log-gammas.
 */

const LOG_2PI = 1.8378770664093456;

/** log Gamma(a+1) - [(a+1/2) log a - a + log(2 pi)/2], a > 0. */
export function stirlingError(a: number): number {
	let shift = 0;
	let at = a;
	// The recurrence moves small arguments to where the asymptotic series is exact to the last digit.
	for (; at < 16; at++) shift += (at + 0.5) * Math.log1p(1 / at) - 1;
	const inverse = 1 / (at * at);
	const series = 1 / 1260 - (1 / 1680 - (1 / 1188 - (691 / 360360) * inverse) * inverse) * inverse;
	return shift + (1 / 12 - (1 / 360 - series * inverse) * inverse) / at;
}

/** x log(x/m) + m - x, x >= 0, m > 0: the deviance term, accurate when x is close to m. */
export function deviance(x: number, m: number): number {
	if (x === 0) return m;
	if (Math.abs(x - m) >= 0.1 * (x + m)) return x * Math.log(x / m) + m - x;
	const ratio = (x - m) / (x + m);
	let term = 2 * x * ratio;
	let total = (x - m) * ratio;
	for (let j = 1; j < 1000; j++) {
		term *= ratio * ratio;
		const next = total + term / (2 * j + 1);
		if (next === total) return next;
		total = next;
	}
	return total;
}

/** log of x^a e^-x / Gamma(a+1), a > 0, x > 0. */
export const logPoissonMass = (a: number, x: number): number =>
	-stirlingError(a) - deviance(a, x) - 0.5 * (LOG_2PI + Math.log(a));

/** log of x^a y^b / B(a,b) where y = 1 - x is given and not formed by subtraction; a, b, x, y > 0. */
export function logBetaMass(a: number, b: number, x: number, y: number): number {
	const n = a + b;
	const exponent =
		stirlingError(n) - stirlingError(a) - stirlingError(b) - deviance(a, n * x) - deviance(b, n * y);
	return exponent + 0.5 * (Math.log(a) + Math.log(b / n) - LOG_2PI);
}
