import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { toLevels } from '$lib/econometrics/error-correction/adl';
import { autoregression, halfLife } from '$lib/econometrics/error-correction/half-life';
import { dynamics } from '$lib/econometrics/error-correction/lag-polynomial';
import { driverDelay, shareArrived } from '$lib/econometrics/error-correction/mean-lag';
import { cumulativeMultipliers, shockResponse } from '$lib/econometrics/error-correction/multipliers';
import type { Coefficients, Term } from '$lib/econometrics/error-correction/terms';
import { made, reasonOf } from '../simulated';

const equationWith = (
	speed: number,
	own: readonly number[] = [],
	driver: { readonly level: number; readonly changes: readonly number[] } = { level: 0.2, changes: [0.1] },
	variance: number | null = null
): Coefficients => {
	const terms: Term[] = [
		{ kind: 'own-level', lag: 1 },
		{ kind: 'driver-level', series: 'x', lag: 1 },
		...own.map((_, i): Term => ({ kind: 'own-change', lag: i + 1 })),
		...driver.changes.map((_, lag): Term => ({ kind: 'driver-change', series: 'x', lag }))
	];
	const k = terms.length;
	const covariance = variance === null ? null : new Float64Array(k * k);
	if (covariance) for (let i = 0; i < k; i++) covariance[i * k + i] = variance!;
	return {
		terms,
		values: Float64Array.of(-speed, driver.level, ...own, ...driver.changes),
		covariance,
		df: 60
	};
};

describe('half-life', () => {
	it('without own lags is ln .5 / ln(1 - speed), its interval that of the speed turned over', () => {
		const half = made(halfLife(equationWith(0.2, [], undefined, 0.05 ** 2), 0.95));
		expect(half.periods).toBeCloseTo(Math.log(0.5) / Math.log(0.8), 13);
		const t = 2.000297821058262; // Student's t, 60 degrees of freedom, 97.5 %
		expect(half.interval!.low).toBeCloseTo(Math.log(0.5) / Math.log(1 - 0.2 - t * 0.05), 8);
		expect(half.interval!.high).toBeCloseTo(Math.log(0.5) / Math.log(1 - 0.2 + t * 0.05), 8);
		const numeric = (Math.log(0.5) / Math.log(0.8 - 1e-6) - Math.log(0.5) / Math.log(0.8 + 1e-6)) / 2e-6;
		expect(half.se).toBeCloseTo(Math.abs(numeric) * 0.05, 6);
	});

	it('has no upper end when the speed may be 0', () => {
		expect(made(halfLife(equationWith(0.08, [], undefined, 0.05 ** 2), 0.95)).interval!.high).toBeNull();
	});

	it('joins the closed form as own lags vanish', () => {
		const closed = made(halfLife(equationWith(0.15), 0.95)).periods;
		expect(made(halfLife(equationWith(0.15, [1e-12]), 0.95)).periods).toBeCloseTo(closed, 8);
	});

	it('with own lags is the last time the response to a shock is above a half', () => {
		const coefficients = equationWith(0.1, [0.5, 0.2]);
		const psi = shockResponse(autoregression(coefficients), 200);
		const half = made(halfLife(coefficients, 0.95)).periods;
		expect(Math.abs(psi[Math.floor(half)]!)).toBeGreaterThan(0.5);
		psi.slice(Math.ceil(half)).forEach((value) => expect(Math.abs(value)).toBeLessThanOrEqual(0.5));
	});

	it('has a delta-method error with own lags that repeated draws confirm to first order', () => {
		const small = made(halfLife(equationWith(0.2, [0.3], undefined, 1e-8), 0.95));
		const at = (dSpeed: number, dOwn: number) =>
			made(halfLife(equationWith(0.2 + dSpeed, [0.3 + dOwn]), 0.95)).periods;
		const slopes = [(at(1e-6, 0) - at(-1e-6, 0)) / 2e-6, (at(0, 1e-6) - at(0, -1e-6)) / 2e-6];
		expect(small.se).toBeCloseTo(1e-4 * Math.hypot(slopes[0]!, slopes[1]!), 8);
	});

	it('alternates beyond a speed of 1 and does not close at 0 or 2', () => {
		// psi = 1, -.4, .16: a half is crossed linearly between 1 and -.4.
		expect(made(halfLife(equationWith(1.4), 0.95)).periods).toBeCloseTo(0.5 / 1.4, 12);
		expect(reasonOf(halfLife(equationWith(0), 0.95))).toBe('domain');
		expect(reasonOf(halfLife(equationWith(-0.1), 0.95))).toBe('domain');
		expect(reasonOf(halfLife(equationWith(2.1), 0.95))).toBe('domain');
		expect(reasonOf(halfLife(equationWith(0.0001, [0.1]), 0.95))).toBe('domain');
	});
});

describe('roots', () => {
	it('of two lags are those of the quadratic formula', () => {
		const [mu1, mu2] = [1.1, -0.6];
		const { roots, stable } = dynamics(Float64Array.of(mu1, mu2));
		const im = Math.sqrt(-(mu1 ** 2) / 4 - mu2);
		expect(roots[0]!.re).toBeCloseTo(mu1 / 2, 14);
		expect(Math.abs(roots[0]!.im)).toBeCloseTo(im, 14);
		expect(roots[0]!.modulus).toBeCloseTo(Math.sqrt(-mu2), 14);
		expect(roots[0]!.period).toBeCloseTo((2 * Math.PI) / Math.atan2(im, mu1 / 2), 12);
		expect(stable).toBe(true);
	});

	it('are found again from their product', () => {
		const root = fc.double({ min: -1.2, max: 1.2, noNaN: true });
		fc.assert(
			fc.property(
				fc.uniqueArray(root, { minLength: 1, maxLength: 6, comparator: (a, b) => Math.abs(a - b) < 0.05 }),
				(real) => {
					let polynomial = [1];
					for (const r of real)
						polynomial = [...polynomial, 0].map((c, i) => c - r * (polynomial[i - 1] ?? 0));
					const found = dynamics(Float64Array.from(polynomial.slice(1), (c) => -c)).roots;
					const expected = [...real].sort((a, b) => a - b);
					const got = found.map((r) => r.re).sort((a, b) => a - b);
					got.forEach((value, i) => expect(Math.abs(value - expected[i]!)).toBeLessThan(1e-8));
					found.forEach((r) => expect(Math.abs(r.im)).toBeLessThan(1e-7));
				}
			),
			{ numRuns: 100, seed: 20260102 }
		);
	});

	it('a last lag of 0 adds a root at 0; a random walk has the root 1', () => {
		expect(dynamics(Float64Array.of(0.5, 0)).roots.map((r) => r.modulus)).toEqual([0.5, 0]);
		expect(dynamics(Float64Array.of(1)).stable).toBe(false);
	});
});

describe('multipliers', () => {
	const coefficients = equationWith(0.25, [0.2, -0.1], { level: 0.3, changes: [0.5, 0.2] });
	const levels = toLevels(coefficients);

	it('start with the effect of the same period and end at the long-run slope', () => {
		const path = cumulativeMultipliers(levels, 'x', 200);
		expect(path[0]).toBeCloseTo(0.5, 14);
		expect(path[200]).toBeCloseTo(0.3 / 0.25, 10);
		expect(shareArrived(levels, 'x', 0)).toBeCloseTo(0.5 / 1.2, 12);
	});

	it('have the mean lag of their own increments', () => {
		const slow = toLevels(equationWith(0.25, [0.2], { level: 0.3, changes: [0.1] }));
		const path = cumulativeMultipliers(slow, 'x', 2000);
		let weighted = 0;
		for (let h = 1; h < path.length; h++) weighted += h * (path[h]! - path[h - 1]!);
		const delay = driverDelay(slow, 'x');
		expect(delay.mean).toBeCloseTo(weighted / path[2000]!, 8);
		expect(delay.median).toBe(path.findIndex((value) => value >= path[2000]! / 2));
	});

	it('have no mean lag where the lags differ in sign', () => {
		const mixed = toLevels(equationWith(0.25, [], { level: 0.3, changes: [0.5] }));
		expect(driverDelay(mixed, 'x').mean).toBeNull();
		expect(driverDelay(mixed, 'x').median).toBe(1);
	});

	it('respond to a shock as the roots say', () => {
		expect(Array.from(shockResponse(Float64Array.of(0.5), 3))).toEqual([1, 0.5, 0.25, 0.125]);
	});
});
