import { describe, expect, it } from 'vitest';
import fc from 'fast-check';
import { isRefusal } from '$lib/econometrics/refusal';
import { addedColumns } from '$lib/econometrics/regression/added-columns';
import {
	bandwidths,
	cubeRootLag,
	ruleOfThumbLag,
	truncationLag
} from '$lib/econometrics/regression/bandwidth';
import { durbinWatsonP } from '$lib/econometrics/regression/durbin-watson-p';
import { leastSquares } from '$lib/econometrics/regression/least-squares';
import { neweyWest } from '$lib/econometrics/regression/newey-west';
import { coefficient, ols } from '$lib/econometrics/regression/ols';
import { robustErrors } from '$lib/econometrics/regression/robust';
import { drawNormal, mulberry32 } from '$lib/econometrics/random/mulberry32';
import { designOf } from '$lib/econometrics/series/design';
import { constant, indicator } from '$lib/econometrics/series/deterministic';
import { apart, drawSample, must, withColumn } from './sample';

const size = fc.record({
	seed: fc.nat(1e6),
	n: fc.integer({ min: 15, max: 60 }),
	k: fc.integer({ min: 1, max: 6 })
});

describe('ols', () => {
	it('solves the textbook line', () => {
		const x = Float64Array.from([1, 2, 3, 4]);
		const fit = must(ols(Float64Array.from([2, 4, 5, 4]), designOf([constant(4), { name: 'x', column: x }])));
		expect([...fit.coef].map((b) => +b.toFixed(12))).toEqual([2, 0.7]);
		expect(fit.rss).toBeCloseTo(2.3, 12);
		expect(coefficient(fit, 'x')?.se).toBeCloseTo(Math.sqrt(1.15 / 5), 12);
		expect(coefficient(fit, 'z')).toBeUndefined();
		expect(Object.isFrozen(fit)).toBe(true);
	});

	it('leaves residuals orthogonal to every regressor, and leverages that sum to k', () => {
		fc.assert(
			fc.property(size, ({ seed, n, k }) => {
				const { y, design } = drawSample(seed, n, k);
				const fit = must(ols(y, design));
				for (const column of design.columns) {
					const product = column.reduce((sum, x, t) => sum + x * fit.resid[t]!, 0);
					const scale = Math.sqrt(column.reduce((sum, x) => sum + x * x, 0) * fit.rss);
					expect(Math.abs(product) / scale).toBeLessThan(1e-13);
				}
				expect(fit.leverage.reduce((sum, h) => sum + h, 0)).toBeCloseTo(k, 11);
				for (let t = 0; t < n; t++) expect(fit.fitted[t]! + fit.resid[t]!).toBeCloseTo(y[t]!, 12);
			})
		);
	});

	it('does not depend on the units of the data', () => {
		const factor = fc.constantFrom(1e-8, 1e8, 3e-8, 7e7);
		fc.assert(
			fc.property(
				size,
				factor,
				fc.array(factor, { minLength: 6, maxLength: 6 }),
				({ seed, n, k }, c, factors) => {
					const { y, design } = drawSample(seed, n, k);
					const fit = must(ols(y, design));
					const columns = design.columns.map((column, j) => column.map((x) => x * factors[j]!));
					const other = must(
						ols(
							y.map((v) => v * c),
							{ names: design.names, columns }
						)
					);
					for (let j = 0; j < k; j++) {
						expect(apart(other.coef[j]! * factors[j]!, fit.coef[j]! * c)).toBeLessThan(1e-9);
						expect(apart(other.t[j]!, fit.t[j]!)).toBeLessThan(1e-9);
					}
					expect(Math.abs(other.r2 - fit.r2)).toBeLessThan(1e-10);
					expect(apart(other.sigma, fit.sigma * c)).toBeLessThan(1e-11);
					expect(other.aic - other.bic).toBeCloseTo(fit.aic - fit.bic, 9);
				}
			)
		);
	});

	it('accepts magnitudes from 1e-150 to 1e150', () => {
		const { y, design } = drawSample(5, 30, 3);
		const fit = must(ols(y, design));
		for (const c of [1e-140, 1e140]) {
			const columns = design.columns.map((column) => column.map((x) => x / c));
			const other = must(
				ols(
					y.map((v) => v * c),
					{ names: design.names, columns }
				)
			);
			expect(apart(other.coef[1]! / c / c || Infinity, fit.coef[1]!)).toBeLessThan(1e-9);
			expect(apart(other.r2, fit.r2)).toBeLessThan(1e-9);
		}
		expect(
			ols(
				y.map((v) => v * 1e160),
				design
			)
		).toMatchObject({ refused: 'domain' });
	});

	it('names the columns of a collinear design', () => {
		const sample = drawSample(2, 30, 3);
		const [, a, b] = sample.design.columns;
		const both = withColumn(
			sample,
			'both',
			a!.map((v, t) => 2 * v - b![t]! + 4)
		);
		const refusal = ols(both.y, both.design);
		expect(refusal).toMatchObject({ refused: 'rank' });
		expect(isRefusal(refusal) && refusal.detail).toBe(
			'The regressor both is a linear combination of const, x1, x2.'
		);
	});

	it('accepts a design that is nearly collinear, and says how nearly', () => {
		const sample = drawSample(2, 30, 3);
		const near = withColumn(
			sample,
			'near',
			sample.design.columns[1]!.map((v, t) => v + 1e-6 * Math.sin(t))
		);
		expect(must(ols(near.y, near.design)).conditionNumber).toBeGreaterThan(1e6);
	});

	it.each([
		['non-finite', (y: Float64Array) => y.fill(NaN, 3, 4)],
		['non-finite', (y: Float64Array) => y.fill(Infinity, 3, 4)],
		['constant', (y: Float64Array) => y.fill(4)]
	] as const)('refuses y as %s', (reason, spoil) => {
		const { y, design } = drawSample(1, 20, 3);
		spoil(y);
		expect(ols(y, design)).toMatchObject({ refused: reason });
	});

	it('refuses a regressor that does not vary, too few rows and an exact fit', () => {
		const sample = drawSample(1, 20, 3);
		const flat = withColumn(sample, 'flat', new Float64Array(20).fill(7));
		expect(ols(flat.y, flat.design)).toEqual({
			refused: 'constant',
			detail: 'The regressor flat does not vary.'
		});
		const short = drawSample(1, 4, 4);
		expect(ols(short.y, short.design)).toMatchObject({ refused: 'too-short' });
		const exact = sample.design.columns[1]!.map((x, t) => 3 + 2 * x - sample.design.columns[2]![t]!);
		expect(ols(exact, sample.design)).toMatchObject({ refused: 'perfect-fit' });
		expect(must(leastSquares(exact, sample.design)).coef[1]).toBeCloseTo(2, 12);
	});
});

describe('added columns', () => {
	it('lower the residual sum of squares as a fit of everything does', () => {
		fc.assert(
			fc.property(size, fc.nat(1e6), ({ seed, n, k }, other) => {
				const sample = drawSample(seed, n, k);
				const [, a, b] = drawSample(other + 2e6, n, 3).design.columns;
				const fit = must(ols(sample.y, sample.design));
				const larger = withColumn(withColumn(sample, 'a', a!), 'b', b!);
				const refit = must(leastSquares(larger.y, larger.design));
				expect(apart(fit.rss - must(addedColumns(fit, [a!, b!], 'They')), refit.rss)).toBeLessThan(1e-11);
			})
		);
	});

	it('refuse a column that is there already', () => {
		const { y, design } = drawSample(1, 20, 3);
		const fit = must(ols(y, design));
		expect(addedColumns(fit, [design.columns[1]!], 'The columns')).toMatchObject({ refused: 'rank' });
		expect(addedColumns(fit, [new Float64Array(20)], 'The columns')).toMatchObject({ refused: 'constant' });
	});
});

describe('robust errors', () => {
	const { y, design } = drawSample(4, 40, 4);
	const fit = must(ols(y, design));

	it('relate to each other as defined', () => {
		const hc0 = must(robustErrors(fit, 'HC0'));
		const hc1 = must(robustErrors(fit, 'HC1'));
		const white = must(neweyWest(fit, 0));
		const adjusted = must(neweyWest(fit, 3, { adjusted: true }));
		const plain = must(neweyWest(fit, 3));
		for (let j = 0; j < fit.k; j++) {
			expect(apart(hc1.se[j]!, hc0.se[j]! * Math.sqrt(40 / 36))).toBeLessThan(1e-13);
			expect(apart(white.se[j]!, hc0.se[j]!)).toBeLessThan(1e-13);
			expect(apart(adjusted.se[j]!, plain.se[j]! * Math.sqrt(40 / 36))).toBeLessThan(1e-13);
			expect(apart(plain.se[j]! ** 2, plain.vcov[j * fit.k + j]!)).toBeLessThan(1e-13);
		}
	});

	it('give the row of a pulse dummy no weight, and say so', () => {
		const pulsed = withColumn({ y, design }, 'D', indicator('D', 11, 11, 40).column);
		const with_ = must(ols(pulsed.y, pulsed.design));
		const hc3 = must(robustErrors(with_, 'HC3'));
		expect(hc3.fittedExactly).toEqual([12]);
		expect(hc3.se.every((se) => Number.isFinite(se) && se > 0)).toBe(true);
	});

	it('refuse an impossible lag', () => {
		for (const lag of [-1, 1.5, 40, NaN]) expect(neweyWest(fit, lag)).toMatchObject({ refused: 'lag' });
	});
});

describe('bandwidths', () => {
	it('follow the two rules of n and are capped', () => {
		expect([50, 100, 200].map(ruleOfThumbLag)).toEqual([3, 4, 4]);
		expect([50, 100, 200].map(cubeRootLag)).toEqual([2, 3, 4]);
		expect([truncationLag(2.9, 60), truncationLag(90, 60)]).toEqual([2, 20]);
	});

	it('do not depend on the units of y', () => {
		const { y, design } = drawSample(9, 60, 3);
		const a = must(bandwidths(must(ols(y, design))));
		const b = must(
			bandwidths(
				must(
					ols(
						y.map((v) => v * 1e-9),
						design
					)
				)
			)
		);
		expect(apart(a.andrews, b.andrews)).toBeLessThan(1e-10);
		expect(apart(a.neweyWest1994, b.neweyWest1994)).toBeLessThan(1e-10);
	});
});

describe('the p-value of the Durbin-Watson statistic', () => {
	it('is the share of samples without autocorrelation that fall below', () => {
		const { design } = drawSample(17, 30, 3);
		const next = mulberry32(99);
		const draw = () =>
			must(
				ols(
					Float64Array.from({ length: 30 }, () => drawNormal(next)),
					design
				)
			);
		const observed = draw();
		const draws = 4000;
		let below = 0;
		for (let i = 0; i < draws; i++) if (draw().dw <= observed.dw) below++;
		const exact = durbinWatsonP(observed);
		expect(exact.by).toBe('exact');
		expect(Math.abs(below / draws - exact.p)).toBeLessThan(0.025);
	});

	it('comes from the normal distribution from 100 rows on', () => {
		const { y, design } = drawSample(17, 100, 3);
		expect(durbinWatsonP(must(ols(y, design))).by).toBe('normal');
	});
});
