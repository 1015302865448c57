import { describe, expect, it } from 'vitest';
import { bootstrapEngleGranger } from '$lib/econometrics/cointegration/bootstrap-engle-granger';
import { boundsTest, type BoundsCase } from '$lib/econometrics/cointegration/bounds';
import { engleGranger } from '$lib/econometrics/cointegration/engle-granger';
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

const methods: Readonly<Record<string, (of: Case, check: Check) => Record<string, unknown>>> = {
	engle_granger: engleGrangerValues,
	pss_bounds: boundsValues,
	boot_eg: bootstrapValues
};

describe.each(Object.entries(methods))('%s equals the reference', (method, compute) => {
	it.each(checksOf(method).map(({ of, check }) => [`${of.case} ${check.id}`, of, check] as const))(
		'%s',
		(_, of, check) => {
			const found = compare(check, compute(of, check));
			expect(found.differences).toEqual([]);
			expect(found.compared).toBeGreaterThan(4);
		}
	);
});
