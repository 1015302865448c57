import { describe, expect, it } from 'vitest';
import { isRefusal } from '$lib/econometrics/refusal';
import { leastSquares } from '$lib/econometrics/regression/least-squares';
import { ols } from '$lib/econometrics/regression/ols';
import nist from './nist/nist.json';

/**
 * Correct digits demanded of the worst coefficient. Wampler4 and Wampler5 are limited by the size of their
 * residuals and Filip by a condition number of 5e9, not by the solver.
 */
const DIGITS: Readonly<Record<string, number>> = {
	Norris: 9,
	Pontius: 9,
	NoInt1: 9,
	NoInt2: 9,
	Longley: 9,
	Wampler1: 9,
	Wampler2: 9,
	Wampler3: 9,
	Wampler4: 7,
	Wampler5: 5.5,
	Filip: 7
};

type NistSet = (typeof nist.datasets)[number];

/** The certified model of a set: a polynomial, a line through the origin, or several regressors. */
function designFor(set: NistSet) {
	const degree = Number(/polynomial degree (\d+)/.exec(set.model)?.[1] ?? 0);
	const x = (j: number) => Float64Array.from(set.x, (row) => row[j]!);
	const columns = degree
		? Array.from({ length: degree }, (_, j) => x(0).map((v) => v ** (j + 1)))
		: set.x[0]!.map((_, j) => x(j));
	if (!set.name.startsWith('NoInt')) columns.unshift(new Float64Array(set.n).fill(1));
	return { names: columns.map((_, j) => `b${j}`), columns };
}

const digits = (value: number, certified: number): number =>
	value === certified ? 15 : Math.min(15, -Math.log10(Math.abs(value - certified) / Math.abs(certified)));

describe('NIST StRD linear least squares', () => {
	it('covers all eleven sets', () =>
		expect(nist.datasets.map((d) => d.name).sort()).toEqual(Object.keys(DIGITS).sort()));

	it.each(nist.datasets.map((set) => [set.name, set] as const))('%s: coefficients', (name, set) => {
		const fit = leastSquares(Float64Array.from(set.y), designFor(set));
		if (isRefusal(fit)) throw new Error(fit.detail);
		const worst = Math.min(...set.certified.coef.map((b, j) => digits(fit.coef[j]!, b)));
		expect(worst).toBeGreaterThanOrEqual(DIGITS[name]!);
	});

	it.each(nist.datasets.filter((d) => d.certified.res_ss > 0).map((set) => [set.name, set] as const))(
		'%s: standard errors and residual sum of squares',
		(name, set) => {
			const fit = ols(Float64Array.from(set.y), designFor(set));
			if (isRefusal(fit)) throw new Error(fit.detail);
			const worst = Math.min(...set.certified.se.map((se, j) => digits(fit.se[j]!, se)));
			expect(worst).toBeGreaterThanOrEqual(DIGITS[name]!);
			expect(digits(fit.rss, set.certified.res_ss)).toBeGreaterThanOrEqual(DIGITS[name]!);
		}
	);

	it.each(['Wampler1', 'Wampler2'])('%s: an exact fit is not tested', (name) => {
		const set = nist.datasets.find((d) => d.name === name)!;
		expect(ols(Float64Array.from(set.y), designFor(set))).toMatchObject({ refused: 'perfect-fit' });
	});
});
