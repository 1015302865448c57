import { describe, expect, it } from 'vitest';
import { toLevels } from '$lib/econometrics/error-correction/adl';
import { sumOfOwnLags } from '$lib/econometrics/error-correction/lag-coefficients';
import { halfLife } from '$lib/econometrics/error-correction/half-life';
import { longRun } from '$lib/econometrics/error-correction/long-run';
import { cumulativeMultipliers } from '$lib/econometrics/error-correction/multipliers';
import { centred, mean, sumOfSquares } from '$lib/econometrics/linalg/vectors';
import { oneStep } from '$lib/econometrics/error-correction/one-step';
import { projection } from '$lib/econometrics/error-correction/projection';
import { termName, type Coefficients } from '$lib/econometrics/error-correction/terms';
import { twoStep } from '$lib/econometrics/error-correction/two-step';
import { difference } from '$lib/econometrics/series/lags';
import { neweyWest } from '$lib/econometrics/regression/newey-west';
import type { OlsFit } from '$lib/econometrics/regression/ols';
import { equationFrom, sampleFrom, shapeOf } from './cases-as-equations';
import { byName, checksOf, compare, listOf, must, type Case, type Check, type EcmModel } from './reference';
import published from './published.json';

const oneStepOf = (of: Case, check: Check) =>
	must(oneStep(equationFrom(of, shapeOf(of, check)), sampleFrom(of)));

const fitValues = (fit: OlsFit): Record<string, unknown> => ({
	...fit,
	coef: byName(fit.names, fit.coef),
	se: byName(fit.names, fit.se),
	t: byName(fit.names, fit.t),
	p: byName(fit.names, fit.p),
	aic_r: fit.aicR,
	vcov: fit.names.map((_, i) => fit.names.map((_, j) => fit.vcov[j * fit.k + i]!))
});

function oneStepValues(of: Case, check: Check): Record<string, unknown> {
	const { fit, adjustment, coefficients } = oneStepOf(of, check);
	const implied = must(longRun(coefficients));
	const rows = [...implied.slopes, { series: 'const', ...implied.constant! }];
	// The tabulated half-life leaves the own lags out of account.
	const withoutLags: Coefficients = {
		...coefficients,
		terms: coefficients.terms.filter((term) => term.kind === 'own-level'),
		values: Float64Array.of(-adjustment.lambda),
		covariance: null
	};
	const half = halfLife(withoutLags, 0.95);
	return {
		...fitValues(fit),
		lambda: adjustment.lambda,
		half_life: 'periods' in half ? half.periods : null,
		long_run: Object.fromEntries(rows.map(({ series, coef, se, t, p }) => [series, { coef, se, t, p_t: p }]))
	};
}

function twoStepValues(of: Case, check: Check): Record<string, unknown> {
	const equation = equationFrom(of, shapeOf(of, check));
	const { fit, adjustment, ...rest } = must(twoStep(equation, sampleFrom(of)));
	const lags = check.values.nw_L as number;
	return {
		...fitValues(fit),
		lambda: adjustment.lambda,
		static: byName(rest.static!.names, rest.static!.coef),
		nw_L: Math.floor(4 * (fit.nobs / 100) ** (2 / 9)),
		se_nw: byName(fit.names, must(neweyWest(fit, lags)).se)
	};
}

function levelsValues(of: Case, check: Check): Record<string, unknown> {
	const { fit, coefficients } = oneStepOf(of, check);
	const adl = toLevels(coefficients);
	const names = adl.terms.map(termName);
	const errors = names.map((_, i) => Math.sqrt(adl.covariance![i * names.length + i]!));
	const implied = must(longRun(coefficients));
	return {
		coef: byName(names, adl.values),
		se: byName(names, errors),
		sum_mu: sumOfOwnLags(adl),
		lambda: 1 - sumOfOwnLags(adl),
		long_run: Object.fromEntries(implied.slopes.map(({ series, coef }) => [series, coef])),
		rss: fit.rss
	};
}

function multiplierValues(of: Case, check: Check): Record<string, unknown> {
	const adl = toLevels(oneStepOf(of, check).coefficients);
	const drivers = listOf((of.model as EcmModel).x);
	return Object.fromEntries(drivers.map((series) => [series, cumulativeMultipliers(adl, series, 20)]));
}

/** Drivers go on at their mean change; the adverse path falls two standard deviations of a change below over a year. */
function projectionValues(of: Case, check: Check): Record<string, unknown> {
	const horizon = check.params.H as number;
	const { coefficients, equation } = oneStepOf(of, check);
	const sample = sampleFrom(of);
	const paths = (adverse: boolean) =>
		new Map(
			equation.longRun.drivers.map((name) => {
				const x = sample.series.get(name)!;
				const change = difference(x);
				const drift = mean(change);
				const spread = Math.sqrt(sumOfSquares(centred(change)) / (change.length - 1));
				const at = (h: number) =>
					x[of.T - 1]! + h * drift - (adverse ? (2 * spread * Math.min(h, 4)) / 4 : 0);
				return [name, Float64Array.from({ length: horizon }, (_, i) => at(i + 1))] as const;
			})
		);
	const path = (drivers: ReadonlyMap<string, Float64Array>) =>
		must(projection(coefficients, equation, sample, { horizon, drivers, dummies: new Map() }));
	const [base, adverse] = [paths(false), paths(true)];
	return {
		x_base: Object.fromEntries(base),
		x_adverse: Object.fromEntries(adverse),
		y_base: path(base),
		y_adverse: path(adverse)
	};
}

const methods: Readonly<Record<string, (of: Case, check: Check) => Record<string, unknown>>> = {
	ecm_one_step: oneStepValues,
	ecm_two_step: twoStepValues,
	adl_levels: levelsValues,
	cumulative_multipliers: multiplierValues,
	projection: projectionValues
};

describe.each(Object.entries(methods))('%s equals the reference', (method, compute) => {
	it.each(checksOf(method).map(({ of, check }) => [`${of.case} ${check.id}`, of, check] as const))(
		'%s',
		(_, of, check) => {
			const computed = compute(of, check);
			const found = compare(check, computed);
			expect(found.differences).toEqual([]);
			expect(found.compared).toBeGreaterThan(5);
			// The regressors stand in the same order under the same names.
			expect(Object.keys(computed.coef ?? {})).toEqual(Object.keys(check.values.coef ?? {}));
		}
	);
});

describe('published figures', () => {
	it('the generated monthly sample gives back the parameters it was made with, within three standard errors', () => {
		const { of, check } = checksOf('ecm_one_step').find((c) => c.of.case === 'synth_monthly')!;
		const truth = published.items.find((item) => item.case === 'synth_monthly')!.values as {
			lambda: number;
			long_run: number[];
		};
		const { adjustment, coefficients } = oneStepOf(of, check);
		expect(Math.abs(adjustment.lambda - truth.lambda)).toBeLessThan(3 * adjustment.se);
		must(longRun(coefficients)).slopes.forEach(({ coef, se }, j) =>
			expect(Math.abs(coef - truth.long_run[j]!)).toBeLessThan(3 * se!)
		);
	});
});
