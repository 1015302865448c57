import { describe, expect, it } from 'vitest';
import { bandwidths } from '$lib/econometrics/regression/bandwidth';
import { durbinWatsonP } from '$lib/econometrics/regression/durbin-watson-p';
import { neweyWest } from '$lib/econometrics/regression/newey-west';
import type { OlsFit } from '$lib/econometrics/regression/ols';
import { robustErrors, type RobustKind } from '$lib/econometrics/regression/robust';
import { equationOf } from './equations';
import { byName, checksOf, compare, must, type Check } from './reference';

const rows = (fit: OlsFit): number[][] =>
	fit.names.map((_, i) => fit.names.map((_, j) => fit.vcov[j * fit.k + i]!));

const olsValues = (fit: OlsFit): Record<string, unknown> => ({
	nobs: fit.nobs,
	k: fit.k,
	coef: byName(fit.names, fit.coef),
	se: byName(fit.names, fit.se),
	t: byName(fit.names, fit.t),
	p: byName(fit.names, fit.p),
	rss: fit.rss,
	sigma: fit.sigma,
	r2: fit.r2,
	adjr2: fit.adjr2,
	loglik: fit.loglik,
	aic: fit.aic,
	bic: fit.bic,
	hqic: fit.hqic,
	aic_r: fit.aicR,
	dw: fit.dw,
	resid: fit.resid,
	vcov: rows(fit)
});

function robustValues(fit: OlsFit, check: Check): Record<string, unknown> {
	const out: Record<string, unknown> = {};
	for (const key of Object.keys(check.values)) {
		const lag = /^NW_L(\d+)(_adj)?$/.exec(key);
		const estimate = lag
			? neweyWest(fit, Number(lag[1]), { adjusted: lag[2] !== undefined })
			: robustErrors(fit, key as RobustKind);
		out[key] = byName(fit.names, must(estimate).se);
	}
	return out;
}

function bandwidthValues(fit: OlsFit): Record<string, unknown> {
	const b = must(bandwidths(fit));
	return {
		rule_4_2_9: b.ruleOfThumb,
		rule_075: b.cubeRoot,
		andrews_bartlett: b.andrews,
		newey_west_1994: b.neweyWest1994
	};
}

const methods: Readonly<Record<string, (fit: OlsFit, check: Check) => Record<string, unknown>>> = {
	ols: olsValues,
	ecm_one_step: olsValues,
	robust_se: robustValues,
	hac_bandwidth: bandwidthValues,
	durbin_watson: (fit) => ({ dw: fit.dw }),
	durbin_watson_p: (fit) => ({ p: durbinWatsonP(fit).p })
};

/** What an error-correction equation has beyond its regression; held against the reference in its own test. */
const OF_ERROR_CORRECTION = ['half_life', 'lambda', 'long_run'];

/** How many checks and numbers of each method must have been compared. */
const COUNTS: Readonly<Record<string, readonly [checks: number, numbers: number]>> = {
	ols: [4, 399],
	ecm_one_step: [14, 3273],
	robust_se: [12, 938],
	hac_bandwidth: [8, 32],
	durbin_watson: [12, 12],
	durbin_watson_p: [12, 12]
};

describe.each(Object.keys(methods))('%s against the reference', (method) => {
	it('agrees in every case', () => {
		const all = checksOf(method);
		let compared = 0;
		for (const { of, check } of all) {
			const named = method === 'ols' || method === 'ecm_one_step';
			const fit = equationOf(of, named ? check.id : check.on);
			const found = compare(check, methods[method]!(fit, check), OF_ERROR_CORRECTION);
			expect(found.differences, of.case).toEqual([]);
			compared += found.compared;
		}
		expect([all.length, compared]).toEqual(COUNTS[method]);
	});
});

it('Durbin-Watson: with enough nodes the series serves where 15 nodes fail', () => {
	const { of } = checksOf('durbin_watson_p').find(({ of }) => of.case === 'reg_nile')!;
	const fit = equationOf(of, 'ols');
	expect(durbinWatsonP(fit).by).toBe('normal');
	// Imhof's (1961) inversion gives 0.839032; with 97 weights the alternating sum keeps four digits.
	const exact = durbinWatsonP(fit, 200);
	expect(exact.by).toBe('exact');
	expect(exact.p).toBeCloseTo(0.839032, 3);
});
