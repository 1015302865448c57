/** Roots of the autoregressive part of an equation in levels, and what they say about its motion. */
export interface Root {
	readonly re: number;
	readonly im: number;
	readonly modulus: number;
	/** Periods of one turn for a complex root, null for a real one. */
	readonly period: number | null;
}

export interface Dynamics {
	/** Zeros of z^n - mu(1) z^(n-1) - .. - mu(n), largest modulus first. */
	readonly roots: readonly Root[];
	readonly largest: number;
	/** Every root lies inside the unit circle. */
	readonly stable: boolean;
}

/** Eigenvalues of the companion matrix of y(t) = mu(1) y(t-1) + .. + mu(n) y(t-n). */
export function dynamics(mu: Float64Array): Dynamics {
	const roots = [...zeros(mu)]
		.map(([re, im]): Root => {
			const modulus = Math.hypot(re, im);
			const period = im === 0 ? null : (2 * Math.PI) / Math.abs(Math.atan2(im, re));
			return Object.freeze({ re, im, modulus, period });
		})
		.sort((a, b) => b.modulus - a.modulus || b.re - a.re || b.im - a.im);
	const largest = roots[0]?.modulus ?? 0;
	return Object.freeze({ roots: Object.freeze(roots), largest, stable: largest < 1 });
}

type Complex = readonly [re: number, im: number];

const ROUNDS = 200;

/** Aberth's simultaneous iteration (1973) Math. Comp. 27, 339-344, its steps Newton steps corrected for the others. */
function zeros(mu: Float64Array): readonly Complex[] {
	let degree = mu.length;
	// A last coefficient of 0 is a root at 0.
	while (degree > 0 && mu[degree - 1] === 0) degree--;
	const atZero = Array.from({ length: mu.length - degree }, (): Complex => [0, 0]);
	const coefficients = [1, ...mu.slice(0, degree)].map((c, i) => (i === 0 ? 1 : -c));
	let points = startingPoints(coefficients);
	for (let round = 0; round < ROUNDS; round++) {
		let moved = 0;
		points = points.map((z, i) => {
			const step = aberthStep(coefficients, points, z, i);
			moved = Math.max(moved, Math.hypot(...step) / Math.max(Math.hypot(...z), 1e-300));
			return [z[0] - step[0], z[1] - step[1]];
		});
		if (moved < 1e-15) break;
	}
	return [...points.map((z) => settleOnAxis(coefficients, z)), ...atZero];
}

/** A circle inside the bound of Fujiwara, turned off the real axis. */
function startingPoints(coefficients: readonly number[]): Complex[] {
	const degree = coefficients.length - 1;
	const radius = Math.max(...coefficients.slice(1).map((c, i) => Math.abs(c) ** (1 / (i + 1))), 1e-3);
	return Array.from({ length: degree }, (_, i): Complex => {
		const angle = (2 * Math.PI * i) / degree + 0.4;
		return [radius * Math.cos(angle), radius * Math.sin(angle)];
	});
}

function aberthStep(c: readonly number[], points: readonly Complex[], z: Complex, i: number): Complex {
	const [value, slope] = evaluate(c, z);
	if (value[0] === 0 && value[1] === 0) return [0, 0];
	const newton = divide(value, slope);
	let sum: Complex = [0, 0];
	for (const [j, other] of points.entries()) {
		if (j === i) continue;
		const apart: Complex = [z[0] - other[0], z[1] - other[1]];
		if (apart[0] === 0 && apart[1] === 0) continue;
		const inverse = divide([1, 0], apart);
		sum = [sum[0] + inverse[0], sum[1] + inverse[1]];
	}
	const product = multiply(newton, sum);
	return divide(newton, [1 - product[0], -product[1]]);
}

/** Value and derivative by Horner's rule. */
function evaluate(c: readonly number[], z: Complex): readonly [Complex, Complex] {
	let value: Complex = [c[0]!, 0];
	let slope: Complex = [0, 0];
	for (let i = 1; i < c.length; i++) {
		const next = multiply(slope, z);
		slope = [next[0] + value[0], next[1] + value[1]];
		const raised = multiply(value, z);
		value = [raised[0] + c[i]!, raised[1]];
	}
	return [value, slope];
}

/** Takes a root for real when it is so up to the accuracy it can have, and polishes it there by Newton's steps. */
function settleOnAxis(c: readonly number[], z: Complex): Complex {
	if (z[1] === 0 || Math.abs(z[1]) > 1e-9 * Math.max(1, Math.abs(z[0]))) return z;
	let x = z[0];
	for (let i = 0; i < 3; i++) {
		const [value, slope] = evaluate(c, [x, 0]);
		if (slope[0] === 0) break;
		x -= value[0] / slope[0];
	}
	return [x, 0];
}

const multiply = (a: Complex, b: Complex): Complex => [a[0] * b[0] - a[1] * b[1], a[0] * b[1] + a[1] * b[0]];

function divide(a: Complex, b: Complex): Complex {
	const square = b[0] * b[0] + b[1] * b[1];
	if (square === 0) return [0, 0];
	return [(a[0] * b[0] + a[1] * b[1]) / square, (a[1] * b[0] - a[0] * b[1]) / square];
}
