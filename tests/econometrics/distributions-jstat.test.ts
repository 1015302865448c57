import fc from 'fast-check';
import jstat from 'jstat';
import { describe, expect, test } from 'vitest';
import { chiSquareCdf, chiSquareQuantile } from '$lib/econometrics/distributions/chi-square';
import { fCdf } from '$lib/econometrics/distributions/f';
import { normalCdf, normalQuantile } from '$lib/econometrics/distributions/normal';
import { studentTCdf, studentTQuantile } from '$lib/econometrics/distributions/student-t';

/**
 * A second implementation, the package jStat, over the body of each distribution. Its own accuracy bounds the
 * comparison: absolute 1e-6 for probabilities (its incomplete beta stops at 3e-7), relative 1e-6 for quantiles; in the tails it forms 1 - cdf and is no judge.
 */
const { jStat } = jstat;
const body = fc.double({ min: 0.02, max: 0.98, noNaN: true });
const degrees = fc.integer({ min: 2, max: 200 });

const near = (ours: number, theirs: number): void => {
	expect(Math.abs(ours - theirs)).toBeLessThan(1e-6);
};
const close = (ours: number, theirs: number): void => {
	expect(Math.abs(ours - theirs)).toBeLessThanOrEqual(1e-6 * Math.max(1, Math.abs(theirs)));
};

describe('distributions against jStat', () => {
	test('normal', () => {
		fc.assert(
			fc.property(fc.double({ min: -4, max: 4, noNaN: true }), body, (z, p) => {
				near(normalCdf(z), jStat.normal.cdf(z, 0, 1));
				close(normalQuantile(p), jStat.normal.inv(p, 0, 1));
			})
		);
	});
	test('Student t', () => {
		fc.assert(
			fc.property(fc.double({ min: -4, max: 4, noNaN: true }), degrees, body, (t, df, p) => {
				near(studentTCdf(t, df), jStat.studentt.cdf(t, df));
				close(studentTQuantile(p, df), jStat.studentt.inv(p, df));
			})
		);
	});
	test('chi-square', () => {
		fc.assert(
			fc.property(fc.double({ min: 0.1, max: 300, noNaN: true }), degrees, body, (x, df, p) => {
				near(chiSquareCdf(x, df), jStat.chisquare.cdf(x, df));
				close(chiSquareQuantile(p, df), jStat.chisquare.inv(p, df));
			})
		);
	});
	test('F', () => {
		fc.assert(
			fc.property(fc.double({ min: 0.1, max: 8, noNaN: true }), degrees, degrees, (x, a, b) => {
				near(fCdf(x, a, b), jStat.centralF.cdf(x, a, b));
			})
		);
	});
});
