import { describe, expect, it } from 'vitest';
import type { Refusal } from '$lib/econometrics/refusal';
import { difference } from '$lib/econometrics/series/lags';
import { adf, type Adf } from '$lib/econometrics/unit-root/adf';
import { adfAuto, type AdfAuto, type LagRule } from '$lib/econometrics/unit-root/adf-auto';
import { dfGls } from '$lib/econometrics/unit-root/df-gls';
import { kpss, type KpssLag } from '$lib/econometrics/unit-root/kpss';
import type { Deterministic } from '$lib/econometrics/unit-root/mackinnon';
import { phillipsPerron } from '$lib/econometrics/unit-root/phillips-perron';
import { checksOf, compare, must, seriesOf, type Case, type Check } from './reference';

/** A series, or its first difference where the check says `diff(name)`. */
function seriesOn({ on }: Check, of: Case): Float64Array {
	const name = /^diff\((.+)\)$/.exec(on)?.[1];
	return name === undefined ? seriesOf(of, on) : difference(seriesOf(of, name));
}

const parameter = <T>(check: Check, name: string): T => check.params[name] as T;

const adfValues = (test: Adf): Record<string, unknown> => ({
	stat: test.stat,
	rho_minus_1: test.rhoMinusOne,
	se: test.se,
	nobs: test.nobs,
	lags: test.lags,
	pvalue: test.pvalue,
	crit: test.critical,
	phi1: test.phi1,
	phi2: test.phi2,
	phi3: test.phi3
});

const searchValues = (test: AdfAuto): Record<string, unknown> => ({
	...adfValues(test),
	selected_lag: test.search.selected,
	pmax: test.search.maxLag,
	ic_by_lag: test.search.criteria
});

const methods: Readonly<Record<string, (v: Float64Array, check: Check) => Record<string, unknown>>> = {
	adf: (v, check) => {
		const options = { det: parameter<Deterministic>(check, 'det'), lags: parameter<number>(check, 'lags') };
		return adfValues(must(adf(v, options)));
	},
	adf_auto: (v, check) => {
		const test: AdfAuto | Refusal = adfAuto(v, {
			det: parameter(check, 'det'),
			rule: parameter<LagRule>(check, 'rule'),
			maxLag: parameter(check, 'pmax')
		});
		return searchValues(must(test));
	},
	kpss: (v, check) => {
		const lag: KpssLag = parameter(check, 'lag_rule') ?? parameter(check, 'lag');
		const test = must(kpss(v, { det: parameter(check, 'det'), lag }));
		return { stat: test.stat, lag: test.lag, pvalue_interp: test.pvalue };
	},
	pp: (v, check) => {
		const test = must(phillipsPerron(v, { det: parameter(check, 'det'), lag: parameter(check, 'lag') }));
		return { ...test, z_tau: test.zTau, z_alpha: test.zAlpha, pvalue_tau: test.pvalue, crit: test.critical };
	},
	dfgls: (v, check) => {
		const test = must(dfGls(v, { det: parameter(check, 'det'), lags: parameter(check, 'lags') }));
		return { ...test, gls_coef: test.detrending, pvalue_c: test.pvalue };
	}
};

/** urca's own variant of the Phillips-Perron statistics is not computed: the verdict comes from z_tau. */
const except = ['urca_z_tau', 'urca_z_alpha'];

describe.each(Object.entries(methods))('%s equals the reference', (method, compute) => {
	const checks = checksOf(method);
	it.each(checks.map(({ of, check }) => [`${of.case} ${check.id}`, of, check] as const))(
		'%s',
		(_, of, check) => {
			const found = compare(check, compute(seriesOn(check, of), check), except);
			expect(found.differences).toEqual([]);
			expect(found.compared).toBeGreaterThan(2);
		}
	);
});
