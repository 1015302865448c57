import { describe, expect, it } from 'vitest';
import type { Equation, Sample } from '$lib/econometrics/error-correction/equation';
import { oneStep } from '$lib/econometrics/error-correction/one-step';
import { sinceApproval, type Approved } from '$lib/econometrics/error-correction/since-approval';
import { twoStep } from '$lib/econometrics/error-correction/two-step';
import { correctingSample, equation, made, reasonOf } from '../simulated';

const KNOWN = 100;
const upTo = (sample: Sample, T: number): Sample => ({
	T,
	series: new Map([...sample.series].map(([name, v]) => [name, v.slice(0, T)]))
});

function approve(sample: Sample, of: Equation = equation, estimate: typeof oneStep = oneStep): Approved {
	const fit = made(estimate(of, upTo(sample, KNOWN)));
	const relation = fit.form === 'one-step' ? null : fit.relation;
	return { coefficients: fit.coefficients, relation, sigma: fit.fit.sigma, known: KNOWN };
}

describe('since approval', () => {
	const sample = correctingSample(500, 108);

	it('has errors whose spread is that of the derivative of the path, checked numerically', () => {
		const approved = approve(sample);
		const { coefficients } = approved;
		const base = made(sinceApproval(approved, equation, sample));
		const k = coefficients.terms.length;
		const slopes = Array.from({ length: k }, (_, i) => {
			const step = 1e-6;
			const at = (shift: number) => {
				const values = coefficients.values.map((v, j) => (j === i ? v + shift : v));
				return made(
					sinceApproval({ ...approved, coefficients: { ...coefficients, values } }, equation, sample)
				).path;
			};
			const [up, down] = [at(step), at(-step)];
			return up.map((v, h) => (v - down[h]!) / (2 * step));
		});
		const spread = (weight: (h: number) => number) => {
			const g = slopes.map((path) => path.reduce((sum, v, h) => sum + weight(h) * v, 0));
			let total = 0;
			for (let i = 0; i < k; i++)
				for (let j = 0; j < k; j++) total += g[i]! * g[j]! * coefficients.covariance![j * k + i]!;
			return total;
		};
		// The first error: one shock and the coefficients.
		expect(base.deviations[0]! ** 2).toBeCloseTo(approved.sigma ** 2 + spread((h) => (h === 0 ? 1 : 0)), 8);
		const withoutShocks = made(sinceApproval({ ...approved, sigma: 0 }, equation, sample));
		expect(withoutShocks.deviations[5]! ** 2).toBeCloseTo(
			spread((h) => (h === 5 ? 1 : 0)),
			6
		);
		const sum = base.errors.reduce((a, b) => a + b, 0);
		expect((sum / withoutShocks.z) ** 2).toBeCloseTo(
			spread(() => 1),
			4
		);
	});

	it('keeps z inside its limits for a sound equation and leaves them when the relation shifts', () => {
		let beyondTwo = 0;
		let beyondThree = 0;
		let found = 0;
		for (let i = 0; i < 150; i++) {
			const sound = correctingSample(20_000 + 5 * i, 108);
			const approved = approve(sound);
			const { z } = made(sinceApproval(approved, equation, sound));
			if (Math.abs(z) > 2) beyondTwo++;
			if (Math.abs(z) > 3) beyondThree++;
			const shifted = new Map([
				...sound.series,
				['loans', sound.series.get('loans')!.map((v, t) => (t >= KNOWN ? v + 3 : v))]
			]);
			if (Math.abs(made(sinceApproval(approved, equation, { T: 108, series: shifted })).z) > 2) found++;
		}
		expect(beyondTwo).toBeLessThan(30);
		expect(beyondThree).toBeLessThan(10);
		expect(found).toBeGreaterThan(135);
	});

	it('runs around a held gap with dummies of long and short run', () => {
		const regime = new Float64Array(108).fill(1, 60);
		const withStep: Equation = {
			...equation,
			dummies: [{ name: 'regime', kind: 'step', in: 'long', values: regime }]
		};
		const known: Equation = {
			...withStep,
			dummies: [{ ...withStep.dummies[0]!, values: regime.slice(0, KNOWN) }]
		};
		const result = made(sinceApproval(approve(sample, known, twoStep), withStep, sample));
		expect(result.errors.length).toBe(8);
		expect(result.deviations.every((d) => d > 0)).toBe(true);
		expect(Math.abs(result.z)).toBeLessThan(4);
	});

	it('refuses without a new period or a covariance', () => {
		const approved = approve(sample);
		expect(reasonOf(sinceApproval(approved, equation, upTo(sample, KNOWN)))).toBe('not-observable');
		const bare = { ...approved, coefficients: { ...approved.coefficients, covariance: null } };
		expect(reasonOf(sinceApproval(bare, equation, sample))).toBe('given');
	});
});
