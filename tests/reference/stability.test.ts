import { describe, expect, it } from 'vitest';
import type { OlsFit } from '$lib/econometrics/regression/ols';
import { chow, predictiveChow } from '$lib/econometrics/stability/chow';
import { cusum } from '$lib/econometrics/stability/cusum';
import { cusumOfSquares } from '$lib/econometrics/stability/cusum-of-squares';
import { harveyCollier } from '$lib/econometrics/stability/harvey-collier';
import { nyblomHansen } from '$lib/econometrics/stability/nyblom-hansen';
import { olsCusum } from '$lib/econometrics/stability/ols-cusum';
import { recursiveResiduals } from '$lib/econometrics/stability/recursive-residuals';
import { supF, supFBetween, type SupF } from '$lib/econometrics/stability/sup-f';
import {
	recursiveCoefficients,
	rollingCoefficients
} from '$lib/econometrics/stability/windowed-coefficients';
import published from './published.json';
import { equationOf } from './equations';
import { checksOf, compare, listOf, must, type Check } from './reference';

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

function nyblomHansenValues(fit: OlsFit): Values {
	const v = must(nyblomHansen(fit));
	return {
		joint_with_variance: v.jointWithVariance.stat,
		df_with_variance: v.jointWithVariance.df,
		joint_coef_only: v.jointCoefficients.stat,
		df_coef: v.jointCoefficients.df,
		individual: Object.fromEntries(v.individual.map(({ name, stat }) => [name, stat]))
	};
}

function recursiveValues(fit: OlsFit, { params }: Check): Values {
	return { coef: must(recursiveCoefficients(fit, listOf(params.ends as number))).map((w) => w.coef) };
}

function rollingValues(fit: OlsFit, { params }: Check): Values {
	const window = params.window as number;
	return { coef: must(rollingCoefficients(fit, window, listOf(params.starts as number))).map((w) => w.coef) };
}

/** Of a mean alone: the same statistics over a sample trimmed at both ends by the same number of rows. */
function meanBreakValues(fit: OlsFit, { params }: Check): Values {
	const from = Math.floor((params.trim as number) * fit.nobs);
	const v = must(supFBetween(fit, from, fit.nobs - from));
	return { ...breakValues(fit, v), ols_cusum: olsCusum(fit).stat, rec_cusum: must(cusum(fit)).stat };
}

interface Method {
	readonly method: string;
	readonly valuesOf: (fit: OlsFit, check: Check) => Values;
	/** How many checks and numbers of it must have been compared. */
	readonly counts: readonly [checks: number, numbers: number];
	/** Keys of the check that another method computes. */
	readonly except?: readonly string[];
}

const methods: readonly Method[] = [
	{
		method: 'recursive_residuals',
		valuesOf: (fit) => ({ w: must(recursiveResiduals(fit)).w }),
		counts: [12, 1430]
	},
	{ method: 'cusum_rec', valuesOf: cusumValues, counts: [12, 72] },
	{ method: 'cusumsq', valuesOf: cusumOfSquaresValues, counts: [12, 1514] },
	{ method: 'harvey_collier', valuesOf: harveyCollierValues, counts: [12, 36] },
	{
		method: 'ols_cusum',
		valuesOf: (fit) => ({ stat: olsCusum(fit).stat, p: olsCusum(fit).p }),
		counts: [12, 24]
	},
	{ method: 'chow', valuesOf: chowValues, counts: [12, 60] },
	{ method: 'chow_predictive', valuesOf: predictiveChowValues, counts: [12, 72] },
	{ method: 'quandt_andrews', valuesOf: (fit) => breakValues(fit, must(supF(fit))), counts: [19, 190] },
	{ method: 'nyblom_hansen', valuesOf: nyblomHansenValues, counts: [12, 161] },
	{ method: 'recursive_coefficients', valuesOf: recursiveValues, counts: [8, 425] },
	{ method: 'rolling_coefficients', valuesOf: rollingValues, counts: [8, 340] },
	{ method: 'mean_break', valuesOf: meanBreakValues, counts: [2, 18], except: ['rss', 'bic', 'breaks'] }
];

describe.each(methods)('$method against the reference', ({ method, valuesOf, counts, except }) => {
	it('agrees in every case', () => {
		const all = checksOf(method);
		let compared = 0;
		for (const { of, check } of all) {
			const found = compare(check, valuesOf(equationOf(of, check.on), check), except ?? []);
			expect(found.differences, of.case).toEqual([]);
			compared += found.compared;
		}
		expect([all.length, compared]).toEqual(counts);
	});
});

it('agrees with the published figures of the Nile, whose break is known: 1898', () => {
	const { of, check } = checksOf('mean_break').find(({ of }) => of.case === 'nile')!;
	const item = published.items.find((i) => i.case === 'nile')!;
	const values = meanBreakValues(equationOf(of, check.on), check);
	expect(Math.abs((values.supF as number) - item.values.supF!)).toBeLessThanOrEqual(0.005);
	expect(Math.abs((values.ols_cusum as number) - item.values.ols_cusum!)).toBeLessThanOrEqual(0.005);
	expect(of.series.date![(values.break_index as number) - 1]).toBe(String(item.values.break_year));
});
