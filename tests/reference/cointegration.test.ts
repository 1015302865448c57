import { describe, expect, it } from 'vitest';
import { bootstrapEngleGranger } from '$lib/econometrics/cointegration/bootstrap-engle-granger';
import { boundsTest, type BoundsCase } from '$lib/econometrics/cointegration/bounds';
import { dynamicOls } from '$lib/econometrics/cointegration/dynamic-ols';
import { engleGranger } from '$lib/econometrics/cointegration/engle-granger';
import { shin, shinStatistic } from '$lib/econometrics/cointegration/shin';
import { neweyWest } from '$lib/econometrics/regression/newey-west';
import { equationFrom, sampleFrom, shapeOf, staticModelFrom } from './cases-as-equations';
import { byName, checksOf, compare, must, type Case, type Check } from './reference';

function engleGrangerValues(of: Case, check: Check): Record<string, unknown> {
	const test = must(engleGranger(staticModelFrom(of, check.params.det as 'c'), check.params.lags as number));
	const { static: fit } = test;
	return {
		static: {
			...fit,
			coef: byName(fit.names, fit.coef),
			se: byName(fit.names, fit.se),
			t: byName(fit.names, fit.t),
			p: byName(fit.names, fit.p),
			aic_r: fit.aicR
		},
		resid: test.gap,
		adf_stat: test.stat,
		adf_nobs: test.nobs,
		lags: test.lags,
		N: test.variables,
		pvalue: test.pvalue,
		crit_Tm1: test.critical,
		crit_nobs: test.criticalNobs
	};
}

function boundsValues(of: Case, check: Check): Record<string, unknown> {
	const equation = equationFrom(of, shapeOf(of, check));
	const test = must(boundsTest(equation, sampleFrom(of), check.params.case as BoundsCase));
	return { ...test, k: test.drivers };
}

function bootstrapValues(of: Case, check: Check): Record<string, unknown> {
	const { det, lags, B, seed, scheme } = check.params;
	const test = must(
		bootstrapEngleGranger(staticModelFrom(of, det as 'c'), {
			lags: lags as number,
			replications: B as number,
			seed: seed as number,
			scheme: scheme as 'iid'
		})
	);
	return {
		tau: test.stat,
		gamma: test.gamma,
		pvalue: test.pvalue,
		count_le: test.atMost,
		tau_star_first5: test.statistics.slice(0, 5),
		q: test.critical
	};
}

function dynamicOlsValues(of: Case, check: Check): Record<string, unknown> {
	const { det, K, L } = check.params as { det: 'c' | 'ct'; K: number; L: number };
	const model = staticModelFrom(of, det);
	const { fit, ...relation } = must(dynamicOls(model, { leads: K, lag: L }));
	const shown = relation.coefficients.map((c) => c.name);
	const shownOnly = (values: ArrayLike<number>) => byName(shown, values);
	const adjusted = relation.coefficients.map((c) => c.se);
	const degrees = Math.sqrt((fit.nobs - fit.k) / fit.nobs);
	return {
		nobs: fit.nobs,
		k: fit.k,
		K: relation.leads,
		L: relation.lag,
		coef: shownOnly(relation.coefficients.map((c) => c.coef)),
		se_ols: shownOnly(fit.se),
		se_nw: shownOnly(must(neweyWest(fit, L)).se),
		se_lrv: shownOnly(adjusted.map((se) => se * degrees)),
		se_lrv_dfadj: shownOnly(adjusted),
		omega2: relation.longRunVariance,
		sigma: fit.sigma,
		rss: fit.rss,
		resid: fit.resid
	};
}

function shinValues(of: Case, check: Check): Record<string, unknown> {
	const { det, K, L } = check.params as { det: 'c' | 'ct'; K: number | null; L: number };
	const model = staticModelFrom(of, det);
	if (K !== null) return { stat: must(shin(model, { leads: K, lag: L })).stat };
	return { stat: shinStatistic(must(engleGranger(model, 0)).gap, L) };
}

const methods: Readonly<Record<string, (of: Case, check: Check) => Record<string, unknown>>> = {
	engle_granger: engleGrangerValues,
	pss_bounds: boundsValues,
	boot_eg: bootstrapValues,
	dols: dynamicOlsValues,
	shin: shinValues
};

describe.each(Object.entries(methods))('%s equals the reference', (method, compute) => {
	it.each(checksOf(method).map(({ of, check }) => [`${of.case} ${check.id}`, of, check] as const))(
		'%s',
		(_, of, check) => {
			const found = compare(check, compute(of, check));
			expect(found.differences).toEqual([]);
			expect(found.compared).toBeGreaterThan(0);
		}
	);
});
