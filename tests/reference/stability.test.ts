import { describe, expect, it } from 'vitest';
import type { OlsFit } from '$lib/econometrics/regression/ols';
import { chow, predictiveChow } from '$lib/econometrics/stability/chow';
import { cusum } from '$lib/econometrics/stability/cusum';
import { cusumOfSquares } from '$lib/econometrics/stability/cusum-of-squares';
import { harveyCollier } from '$lib/econometrics/stability/harvey-collier';
import { olsCusum } from '$lib/econometrics/stability/ols-cusum';
import { recursiveResiduals } from '$lib/econometrics/stability/recursive-residuals';
import { supF, supFBetween, type SupF } from '$lib/econometrics/stability/sup-f';
import { equationOf } from './equations';
import { checksOf, compare, must, type Check } from './reference';

type Values = Record<string, unknown>;

function cusumValues(fit: OlsFit): Values {
	const v = must(cusum(fit));
	return {
		stat: v.stat,
		p: v.p,
		stat_ols_sigma: v.statOlsSigma,
		p_ols_sigma: v.pOlsSigma,
		crosses_5pct: v.crosses5,
		max_abs_W: v.maxAbs
	};
}

function cusumOfSquaresValues(fit: OlsFit): Values {
	const v = must(cusumOfSquares(fit));
	const crit = Object.fromEntries(['20%', '10%', '5%', '2%', '1%'].map((level, i) => [level, v.critical[i]]));
	return { max_dev: v.maxDeviation, crit_two_sided: crit, m: v.m, path: v.path };
}

function harveyCollierValues(fit: OlsFit): Values {
	const v = must(harveyCollier(fit));
	return { t: v.t, df: v.df, p: v.p };
}

function chowValues(fit: OlsFit, { params }: Check): Values {
	const v = must(chow(fit, params.n1 as number));
	return { n1: v.n1, F: v.f, p: v.p, df1: v.df1, df2: v.df2 };
}

function predictiveChowValues(fit: OlsFit, { params }: Check): Values {
	const v = must(predictiveChow(fit, params.m as number));
	return { n1: v.n1, m: v.m, F: v.f, p: v.p, df1: v.df1, df2: v.df2 };
}

const breakValues = (fit: OlsFit, v: SupF): Values => ({
	n: fit.nobs,
	k: fit.k,
	from: v.from,
	to: v.to,
	lambda: v.lambda,
	break_index: v.breakIndex,
	supF: v.sup.stat,
	supF_p: v.sup.p,
	aveF: v.ave.stat,
	aveF_p: v.ave.p,
	expF: v.exp.stat,
	expF_p: v.exp.p
});

/** Of a mean alone: the same statistics over a sample trimmed at both ends by the same number of rows. */
function meanBreakValues(fit: OlsFit, { params }: Check): Values {
	const from = Math.floor((params.trim as number) * fit.nobs);
	const v = must(supFBetween(fit, from, fit.nobs - from));
	return { ...breakValues(fit, v), ols_cusum: olsCusum(fit).stat, rec_cusum: must(cusum(fit)).stat };
}

/** How each method is computed, and how many checks and numbers of it must have been compared. */
const methods: readonly (readonly [
	string,
	(fit: OlsFit, check: Check) => Values,
	number,
	number,
	string[]?
])[] = [
	['recursive_residuals', (fit) => ({ w: must(recursiveResiduals(fit)).w }), 12, 1430],
	['cusum_rec', cusumValues, 12, 72],
	['cusumsq', cusumOfSquaresValues, 12, 1514],
	['harvey_collier', harveyCollierValues, 12, 36],
	['ols_cusum', (fit) => ({ stat: olsCusum(fit).stat, p: olsCusum(fit).p }), 12, 24],
	['chow', chowValues, 12, 60],
	['chow_predictive', predictiveChowValues, 12, 72],
	['quandt_andrews', (fit) => breakValues(fit, must(supF(fit))), 19, 190],
	['mean_break', meanBreakValues, 2, 18, ['rss', 'bic', 'breaks']]
];

describe.each(methods)('%s against the reference', (method, valuesOf, checks, numbers, except) => {
	it('agrees in every case', () => {
		const all = checksOf(method);
		let compared = 0;
		for (const { of, check } of all) {
			const found = compare(check, valuesOf(equationOf(of, check.on), check), except ?? []);
			expect(found.differences, of.case).toEqual([]);
			compared += found.compared;
		}
		expect([all.length, compared]).toEqual([checks, numbers]);
	});
});
