import { describe, expect, it } from 'vitest';
import { studentTUpperQuantile } from '$lib/econometrics/distributions/student-t';
import { fiellerSet } from '$lib/econometrics/error-correction/fieller';
import { gapFrom } from '$lib/econometrics/error-correction/gap';
import { longRun } from '$lib/econometrics/error-correction/long-run';
import { oneStep } from '$lib/econometrics/error-correction/one-step';
import { covarianceAt, type Coefficients } from '$lib/econometrics/error-correction/terms';
import { correctingSample, equation, made, reasonOf } from '../simulated';

const sample = correctingSample(101, 140);

describe('long run of a one-step equation', () => {
	it('has delta-method errors equal to those from numeric derivatives', () => {
		const fit = made(oneStep({ ...equation, longRun: { ...equation.longRun, trend: true } }, sample));
		const { coefficients } = fit;
		const implied = made(longRun(coefficients));
		const reading = (values: Float64Array) => {
			const moved = made(longRun({ ...coefficients, values }));
			return [moved.lambda, ...moved.slopes.map((s) => s.coef), moved.constant!.coef];
		};
		const k = coefficients.terms.length;
		const jacobian = Array.from({ length: k }, (_, i) => {
			const step = 1e-6 * Math.max(Math.abs(coefficients.values[i]!), 1e-2);
			const at = (shift: number) => reading(coefficients.values.map((v, j) => (j === i ? v + shift : v)));
			return at(step).map((value, r) => (value - at(-step)[r]!) / (2 * step));
		});
		const size = 1 + 2 + 1;
		for (let r = 0; r < size; r++) {
			for (let c = 0; c < size; c++) {
				let numeric = 0;
				for (let i = 0; i < k; i++)
					for (let j = 0; j < k; j++)
						numeric += jacobian[i]![r]! * jacobian[j]![c]! * covarianceAt(coefficients, i, j);
				const scale = Math.sqrt(implied.covariance![r * size + r]! * implied.covariance![c * size + c]!);
				expect(Math.abs(implied.covariance![c * size + r]! - numeric)).toBeLessThan(1e-6 * scale);
			}
		}
		expect(implied.slopes[0]!.se).toBeCloseTo(Math.sqrt(implied.covariance![size + 1]!), 12);
	});

	it('is the relation around which the equation holds: dy = -speed gap + short run', () => {
		const withTrend = { ...equation, longRun: { ...equation.longRun, trend: true } };
		const fit = made(oneStep(withTrend, sample));
		const values = Object.fromEntries(fit.fit.names.map((name, j) => [name, fit.fit.coef[j]!]));
		const gap = gapFrom(fit.relation!, withTrend, sample);
		const change = (name: string, t: number) =>
			sample.series.get(name)![t]! - sample.series.get(name)![t - 1]!;
		for (let r = 0; r < fit.fit.nobs; r++) {
			const t = fit.firstPeriod - 1 + r;
			const predicted =
				-fit.adjustment.lambda * gap[t - 1]! +
				values['d.y.l1']! * change('loans', t - 1) +
				values['d.a.l0']! * change('a', t) +
				values['d.b.l0']! * change('b', t);
			expect(predicted).toBeCloseTo(fit.fit.fitted[r]!, 9);
		}
		expect(fit.gap).toEqual(gap);
	});

	it('does not exist at a speed of 0', () => {
		const still: Coefficients = {
			terms: [
				{ kind: 'own-level', lag: 1 },
				{ kind: 'driver-level', series: 'a', lag: 1 }
			],
			values: Float64Array.of(0, 0.3),
			covariance: null,
			df: 10
		};
		expect(reasonOf(longRun(still))).toBe('domain');
	});

	it('has no errors where the coefficients have none', () => {
		const fit = made(oneStep(equation, sample));
		const given = made(longRun({ ...fit.coefficients, covariance: null }));
		expect(given.slopes[0]).toMatchObject({ se: null, t: null, p: null });
		expect(given.covariance).toBeNull();
	});
});

describe("Fieller's set", () => {
	const fit = made(oneStep(equation, sample));
	const y = fit.coefficients.terms.findIndex((term) => term.kind === 'own-level');
	const x = y + 1;
	const ratio = {
		b: fit.coefficients.values[x]!,
		lambda: fit.adjustment.lambda,
		varB: covarianceAt(fit.coefficients, x, x),
		varLambda: covarianceAt(fit.coefficients, y, y),
		covariance: -covarianceAt(fit.coefficients, x, y)
	};

	it('ends where the test of b - theta lambda = 0 has exactly the critical t', () => {
		const t = studentTUpperQuantile(0.025, fit.coefficients.df);
		const set = fiellerSet(ratio, t);
		if (set.shape !== 'interval') throw new Error(set.shape);
		for (const theta of [set.low, set.high]) {
			const variance = ratio.varB + theta ** 2 * ratio.varLambda - 2 * theta * ratio.covariance;
			expect(Math.abs((ratio.b - theta * ratio.lambda) / Math.sqrt(variance))).toBeCloseTo(t, 10);
		}
		expect(set.low).toBeLessThan(ratio.b / ratio.lambda);
		expect(set.high).toBeGreaterThan(ratio.b / ratio.lambda);
	});

	it('is not an interval when the speed could be 0', () => {
		expect(fiellerSet({ ...ratio, varLambda: ratio.lambda ** 2, varB: ratio.b ** 2 / 9 }, 2).shape).toBe(
			'outside'
		);
		expect(fiellerSet({ b: 0.1, lambda: 0.1, varB: 1, varLambda: 1, covariance: 0 }, 2).shape).toBe(
			'everything'
		);
	});
});
