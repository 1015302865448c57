import { describe, expect, it } from 'vitest';
import { archLm } from '$lib/econometrics/diagnostics/arch-lm';
import { breuschGodfrey } from '$lib/econometrics/diagnostics/breusch-godfrey';
import { breuschPagan } from '$lib/econometrics/diagnostics/breusch-pagan';
import { collinearity } from '$lib/econometrics/diagnostics/collinearity';
import { influence } from '$lib/econometrics/diagnostics/influence';
import { jarqueBera } from '$lib/econometrics/diagnostics/jarque-bera';
import { ljungBox } from '$lib/econometrics/diagnostics/ljung-box';
import { reset } from '$lib/econometrics/diagnostics/reset';
import { white } from '$lib/econometrics/diagnostics/white';
import { whiteSpecial } from '$lib/econometrics/diagnostics/white-special';
import { leastSquares } from '$lib/econometrics/regression/least-squares';
import { ols, type OlsFit } from '$lib/econometrics/regression/ols';
import { designOf } from '$lib/econometrics/series/design';
import { constant } from '$lib/econometrics/series/deterministic';
import { drawNormal, mulberry32 } from '$lib/econometrics/random/mulberry32';
import { apart, drawSample, must, withColumn, type Sample } from './sample';

const sample = drawSample(21, 50, 4);
const fit = must(ols(sample.y, sample.design));
const fitOf = ({ y, design }: Sample): OlsFit => must(ols(y, design));

/** A sample whose errors are made from independent draws by `error(t, draws, errors so far)`. */
function withErrors(
	seed: number,
	n: number,
	error: (t: number, z: Float64Array, e: Float64Array) => number
): Sample {
	const { design } = drawSample(seed, n, 2);
	const next = mulberry32(seed + 77);
	const z = Float64Array.from({ length: n }, () => drawNormal(next));
	const e = new Float64Array(n);
	for (let t = 0; t < n; t++) e[t] = error(t, z, e);
	return { design, y: design.columns[1]!.map((x, t) => 1 + 0.5 * x + e[t]!) };
}

describe('each test is the auxiliary regression it is defined by', () => {
	it('Breusch-Godfrey: e on X and lagged e', () => {
		const lag1 = Float64Array.from(fit.resid, (_, t) => fit.resid[t - 1] ?? 0);
		const lag2 = Float64Array.from(fit.resid, (_, t) => fit.resid[t - 2] ?? 0);
		const aux = withColumn(withColumn({ y: fit.resid, design: sample.design }, 'e1', lag1), 'e2', lag2);
		const whole = must(leastSquares(aux.y, aux.design));
		const test = must(breuschGodfrey(fit, 2));
		expect(apart(test.lm, 50 * (1 - whole.rss / fit.rss))).toBeLessThan(1e-11);
		expect(apart(test.f, (fit.rss - whole.rss) / 2 / (whole.rss / 44))).toBeLessThan(1e-11);
		expect([test.df1, test.df2]).toEqual([2, 44]);
	});

	it('RESET: y on X and powers of the fitted values, also without a constant', () => {
		const open = {
			y: sample.y,
			design: { names: sample.design.names.slice(1), columns: sample.design.columns.slice(1) }
		};
		for (const [of, powers] of [
			[sample, [2, 3]],
			[sample, [3]],
			[open, [2, 3]]
		] as const) {
			const base = fitOf(of);
			const whole = powers.reduce<Sample>(
				(s, power) =>
					withColumn(
						s,
						`f${power}`,
						base.fitted.map((f) => f ** power)
					),
				of
			);
			const refit = must(leastSquares(whole.y, whole.design));
			const test = must(reset(base, powers));
			const expected = (base.rss - refit.rss) / test.df1 / (refit.rss / test.df2);
			expect(apart(test.f, expected)).toBeLessThan(1e-8);
		}
	});

	it('collinearity: 1/(1-R^2) of each regressor on the others', () => {
		const [c, x1, x2, x3] = sample.design.columns;
		const aux = must(ols(x2!, { names: ['const', 'x1', 'x3'], columns: [c!, x1!, x3!] }));
		const found = must(collinearity(fit)).vif;
		expect(found.map((v) => v.name)).toEqual(['x1', 'x2', 'x3']);
		expect(apart(found[1]!.vif, 1 / (1 - aux.r2))).toBeLessThan(1e-11);
	});
});

describe('each test sees what it is made for', () => {
	it('autocorrelation', () => {
		const bad = fitOf(withErrors(3, 120, (t, z, e) => 0.7 * (e[t - 1] ?? 0) + z[t]!));
		const good = fitOf(withErrors(3, 120, (t, z) => z[t]!));
		expect(must(breuschGodfrey(bad, 1)).fP).toBeLessThan(1e-6);
		expect(must(breuschGodfrey(good, 1)).fP).toBeGreaterThan(0.05);
		expect(must(ljungBox(bad.resid, 4)).lbP).toBeLessThan(1e-6);
		expect(must(ljungBox(bad.resid, 4)).acf[0]).toBeGreaterThan(0.4);
		expect(must(ljungBox(good.resid, 4)).lbP).toBeGreaterThan(0.05);
		expect(bad.dw).toBeLessThan(1.2);
	});

	it('ARCH', () => {
		const bad = fitOf(withErrors(4, 300, (t, z, e) => z[t]! * Math.sqrt(0.3 + 0.7 * (e[t - 1] ?? 0) ** 2)));
		const good = fitOf(withErrors(4, 300, (t, z) => z[t]!));
		expect(must(archLm(bad.resid, 1)).fP).toBeLessThan(1e-3);
		expect(must(archLm(good.resid, 1)).fP).toBeGreaterThan(0.05);
	});

	it('unequal variance', () => {
		const { design } = drawSample(6, 150, 2);
		const bad = fitOf(withErrors(6, 150, (t, z) => z[t]! * Math.exp(0.3 * design.columns[1]![t]!)));
		const good = fitOf(withErrors(6, 150, (t, z) => z[t]!));
		expect(must(breuschPagan(bad)).koenkerP).toBeLessThan(1e-3);
		expect(must(whiteSpecial(bad)).specialP).toBeLessThan(1e-3);
		expect(must(breuschPagan(good)).koenkerP).toBeGreaterThan(0.05);
		expect(must(whiteSpecial(good)).specialP).toBeGreaterThan(0.05);
	});

	it('non-normal errors and a non-linear relation', () => {
		const skewed = fitOf(withErrors(7, 200, (t, z) => Math.exp(z[t]!)));
		expect(must(jarqueBera(skewed.resid)).p).toBeLessThan(1e-10);
		expect(must(jarqueBera(fitOf(withErrors(7, 200, (t, z) => z[t]!)).resid)).p).toBeGreaterThan(0.05);
		const linear = withErrors(8, 100, (t, z) => 0.2 * z[t]!);
		const curved = { ...linear, y: linear.y.map((y, t) => y + 0.2 * linear.design.columns[1]![t]! ** 2) };
		expect(must(reset(fitOf(curved))).fP).toBeLessThan(1e-6);
		expect(must(reset(fitOf(linear))).fP).toBeGreaterThan(0.05);
	});
});

describe('refusals', () => {
	it('of lags that cannot be', () => {
		for (const lag of [0, -1, 1.5, 50]) {
			expect(breuschGodfrey(fit, lag)).toMatchObject({ refused: 'lag' });
			expect(ljungBox(fit.resid, lag)).toMatchObject({ refused: 'lag' });
			expect(archLm(fit.resid, lag)).toMatchObject({ refused: 'lag' });
		}
		expect(ljungBox(fit.resid, 3, 3)).toMatchObject({ refused: 'lag' });
		expect(reset(fit, [])).toMatchObject({ refused: 'lag' });
		expect(reset(fit, [1, 2])).toMatchObject({ refused: 'lag' });
	});

	it('of too few rows', () => {
		const short = fitOf(drawSample(2, 7, 4));
		expect(breuschGodfrey(short, 3)).toMatchObject({ refused: 'too-short' });
		expect(reset(short, [2, 3, 4])).toMatchObject({ refused: 'too-short' });
		expect(archLm(short.resid, 4)).toMatchObject({ refused: 'too-short' });
	});

	it('of an equation with nothing but a constant, and of residuals that do not vary', () => {
		const mean = must(ols(sample.y, designOf([constant(50)])));
		expect(breuschPagan(mean)).toMatchObject({ refused: 'constant' });
		expect(whiteSpecial(mean)).toMatchObject({ refused: 'constant' });
		expect(reset(mean)).toMatchObject({ refused: 'constant' });
		expect(jarqueBera(new Float64Array(9).fill(2))).toMatchObject({ refused: 'constant' });
		expect(ljungBox(new Float64Array(9), 2)).toMatchObject({ refused: 'constant' });
		expect(
			archLm(
				Float64Array.from({ length: 20 }, (_, t) => (t % 2 ? 1 : -1)),
				1
			)
		).toMatchObject({ refused: 'constant' });
	});
});

it('no statistic depends on the unit of y', () => {
	const other = must(
		ols(
			sample.y.map((v) => v * 1e-8),
			sample.design
		)
	);
	const pairs = [
		[must(breuschGodfrey(fit, 2)).f, must(breuschGodfrey(other, 2)).f],
		[must(ljungBox(fit.resid, 4)).lb, must(ljungBox(other.resid, 4)).lb],
		[must(archLm(fit.resid, 2)).lm, must(archLm(other.resid, 2)).lm],
		[must(breuschPagan(fit)).bp, must(breuschPagan(other)).bp],
		[must(whiteSpecial(fit)).special, must(whiteSpecial(other)).special],
		[must(jarqueBera(fit.resid)).jb, must(jarqueBera(other.resid)).jb],
		[must(reset(fit)).f, must(reset(other)).f]
	] as const;
	for (const [a, b] of pairs) expect(apart(a, b)).toBeLessThan(1e-9);
});

describe('influence', () => {
	it('of a row is what a fit without it shows', () => {
		const rows = must(influence(fit));
		const t = 17;
		const keep = (v: Float64Array): Float64Array => v.filter((_, i) => i !== t);
		const without = must(
			ols(keep(sample.y), { names: sample.design.names, columns: sample.design.columns.map(keep) })
		);
		const row = rows[t]!;
		const unscaled = fit.se.map((se) => se / fit.sigma);
		row.dfbetas!.forEach((value, j) => {
			const change = (fit.coef[j]! - without.coef[j]!) / (without.sigma * unscaled[j]!);
			expect(Math.abs(value - change)).toBeLessThan(1e-10);
		});
		const predicted = sample.design.columns.reduce(
			(sum, column, j) => sum + column[t]! * without.coef[j]!,
			0
		);
		expect(row.dffits).toBeCloseTo((fit.fitted[t]! - predicted) / (without.sigma * Math.sqrt(row.hat)), 9);
	});

	it('flags an outlier far from the rest, and shows a row that is fitted exactly as such', () => {
		const x = sample.design.columns[1]!.slice();
		x[40] = 60;
		const columns = sample.design.columns.map((column, j) => (j === 1 ? x : column));
		const odd = { y: sample.y.map((v, i) => (i === 40 ? v + 30 : v)), design: { ...sample.design, columns } };
		expect(must(influence(fitOf(odd)))[40]!.flags).toEqual(['hat', 'dffits', 'dfbetas', 'cooks']);
		const pulsed = withColumn(
			sample,
			'D',
			Float64Array.from({ length: 50 }, (_, i) => (i === 9 ? 1 : 0))
		);
		const row = must(influence(fitOf(pulsed)))[9]!;
		expect(row).toMatchObject({ row: 10, rstudent: null, cooks: null, dfbetas: null, flags: ['hat'] });
	});

	it('is refused when leaving out a row leaves nothing', () => {
		expect(influence(fitOf(drawSample(2, 5, 4)))).toMatchObject({ refused: 'too-short' });
	});
});

describe('White', () => {
	it('counts levels, squares and cross-products', () => {
		expect(must(white(fit)).df).toBe(3 + 3 + 3);
	});

	it('is refused with a dummy, with too many terms, and with a constant alone', () => {
		const dummy = withColumn(
			sample,
			'D',
			Float64Array.from({ length: 50 }, (_, i) => (i > 20 ? 1 : 0))
		);
		expect(white(fitOf(dummy))).toMatchObject({ refused: 'rank' });
		expect(white(fitOf(drawSample(2, 20, 6)))).toMatchObject({ refused: 'too-short' });
		expect(white(must(ols(sample.y, designOf([constant(50)]))))).toMatchObject({ refused: 'constant' });
	});
});
