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
import { isRefusal } from '$lib/econometrics/refusal';
import type { OlsFit } from '$lib/econometrics/regression/ols';
import { equationOf } from './equations';
import { checksOf, compare, listOf, must, type Check } from './reference';

type Values = Record<string, unknown>;

function breuschGodfreyValues(fit: OlsFit, { params }: Check): Values {
	const v = must(breuschGodfrey(fit, params.order as number));
	return { lm: v.lm, lm_p: v.lmP, F: v.f, F_p: v.fP, df1: v.df1, df2: v.df2 };
}

function ljungBoxValues(fit: OlsFit, { params }: Check): Values {
	const v = must(ljungBox(fit.resid, params.lags as number, params.fitdf as number));
	return { lb: v.lb, lb_p: v.lbP, bp: v.bp, bp_p: v.bpP, lags: v.lags, df: v.df };
}

function archValues(fit: OlsFit, { params }: Check): Values {
	const v = must(archLm(fit.resid, params.lags as number));
	return { lm: v.lm, lm_p: v.lmP, F: v.f, F_p: v.fP, nobs: v.nobs };
}

function breuschPaganValues(fit: OlsFit): Values {
	const v = must(breuschPagan(fit));
	return { koenker: v.koenker, koenker_p: v.koenkerP, bp: v.bp, bp_p: v.bpP, F: v.f, F_p: v.fP, df: v.df };
}

function whiteSpecialValues(fit: OlsFit): Values {
	const v = must(whiteSpecial(fit));
	return { special: v.special, special_p: v.specialP, df: v.df };
}

function jarqueBeraValues(fit: OlsFit): Values {
	const v = must(jarqueBera(fit.resid));
	return { jb: v.jb, p: v.p, skew: v.skew, kurt: v.kurt };
}

function resetValues(fit: OlsFit, { params }: Check): Values {
	const v = must(reset(fit, listOf(params.powers as number)));
	return { F: v.f, F_p: v.fP, df1: v.df1, df2: v.df2 };
}

function collinearityValues(fit: OlsFit): Values {
	const v = must(collinearity(fit));
	const vif = Object.fromEntries(v.vif.map((entry) => [entry.name, entry.vif]));
	return { vif, condition_number_scaled: v.conditionNumber };
}

/** Where there are too many terms, or collinear ones, the reference has none either. */
function whiteValues(fit: OlsFit): Values {
	const v = white(fit);
	if (isRefusal(v)) return { full: null, note: 'skipped: too many or collinear auxiliary regressors' };
	return { full: v.full, full_p: v.p, full_df: v.df };
}

function influenceValues(fit: OlsFit): Values {
	const rows = must(influence(fit));
	const keys = ['hat', 'rstandard', 'rstudent', 'cooks', 'dffits', 'dfbetas'] as const;
	return Object.fromEntries(keys.map((key) => [key, rows.map((row) => row[key])]));
}

/** How each method is computed, and how many checks and numbers of it must have been compared. */
const methods: readonly (readonly [string, (fit: OlsFit, check: Check) => Values, number, number])[] = [
	['breusch_godfrey', breuschGodfreyValues, 35, 210],
	['ljung_box', ljungBoxValues, 36, 216],
	['arch_lm', archValues, 24, 120],
	['breusch_pagan', breuschPaganValues, 12, 84],
	['white_special', whiteSpecialValues, 12, 36],
	['jarque_bera', jarqueBeraValues, 12, 48],
	['reset', resetValues, 24, 96],
	['white', whiteValues, 12, 34],
	['influence', influenceValues, 12, 25033],
	['vif', collinearityValues, 12, 101]
];

describe.each(methods)('%s against the reference', (method, valuesOf, checks, numbers) => {
	it('agrees in every case', () => {
		const all = checksOf(method);
		let compared = 0;
		for (const { of, check } of all) {
			const found = compare(check, valuesOf(equationOf(of, check.on), check));
			expect(found.differences, of.case).toEqual([]);
			compared += found.compared;
		}
		expect([all.length, compared]).toEqual([checks, numbers]);
	});
});
