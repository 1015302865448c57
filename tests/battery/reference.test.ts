import { describe, expect, test } from 'vitest';
import { runBattery } from '$lib/battery/run-battery';
import type { RunResult } from '$lib/domain/run-result';
import { caseNames, loadCase, type Case, type Check as Reference } from '../reference/reference';
import { caseData, caseSpecification, checkIn, partIn, policy, requestOf } from './cases';

/**
 * Figures of the whole battery against reference values of R and Python packages (sources: tests/reference/SOURCES.md),
 * each at the tolerance of its check. Macrodata: US consumption, Debian python3-statsmodels; denmark: Danish money demand,
 * Johansen & Juselius 1990, Debian r-cran-urca.
 */
const cases = caseNames.map(loadCase).filter(({ model }) => model !== undefined && 'p' in model);

/** How many figures were held against a reference. */
let compared = 0;

type Tree = Readonly<Record<string, unknown>>;

const referenceOf = (of: Case, id: string): Reference => of.checks.find((check) => check.id === id)!;

const near = (got: unknown, reference: Reference, ...path: string[]): void => {
	const expected = path.reduce<unknown>((value, key) => (value as Tree)[key], reference.values) as number;
	const allowed =
		reference.rtol * Math.max(Math.abs(expected), 1e-6) + (path.at(-1)!.includes('p') ? 1e-10 : 0);
	compared++;
	expect(typeof got, `${reference.id}.${path.join('.')}`).toBe('number');
	expect(Math.abs((got as number) - expected), `${reference.id}.${path.join('.')}`).toBeLessThanOrEqual(
		allowed
	);
};

/** Caps that let the lag search go as far as the reference did. */
const widerSearch = [
	{ setting: 'checks/integration.adf/cap-annual', value: 12, reason: 'as the reference' },
	{ setting: 'checks/integration.adf/cap-quarterly', value: 12, reason: 'as the reference' }
];

const compareEquation = (result: RunResult, reference: Reference): void => {
	const { equation } = result.estimates!;
	for (const { term, value, se, t, p } of equation.terms) {
		near(value, reference, 'coef', term.code);
		near(se, reference, 'se', term.code);
		near(t, reference, 't', term.code);
		near(p, reference, 'p', term.code);
	}
	near(equation.fit.rss, reference, 'rss');
	near(equation.fit.r2, reference, 'r2');
	near(equation.fit.durbinWatson, reference, 'dw');
	near(equation.fit.logLikelihood, reference, 'loglik');
	expect(equation.fit.n).toBe(reference.values['nobs']);
};

describe.each(cases.map((of) => [of.case, of] as const))('one-step, %s', (_, of) => {
	const result = runBattery(requestOf(caseSpecification(of, 'one-step')), policy, caseData(of));

	test('coefficients, errors and fit', () => compareEquation(result, referenceOf(of, 'ecm1')));

	test('speed and long run with delta-method errors', () => {
		const reference = referenceOf(of, 'ecm1');
		near(result.estimates!.speed.value, reference, 'lambda');
		for (const { term, value, se } of result.estimates!.longRun) {
			if (term.kind === 'trend') continue;
			const name = term.kind === 'constant' ? 'const' : term.series!;
			near(value, reference, 'long_run', name, 'coef');
			near(se, reference, 'long_run', name, 'se');
		}
	});

	test('residual diagnostics', () => {
		const bg = checkIn(result, 'residual.autocorrelation');
		for (const { about, statistic, pValue } of bg.parts!) {
			const reference = of.checks.find(({ id }) => id === `bg.${about.slice(6)}`);
			if (!reference || statistic === undefined) continue;
			near(statistic.value, reference, 'F');
			near(pValue, reference, 'F_p');
		}
		const bp = checkIn(result, 'residual.heteroskedasticity');
		if (bp.statistic) {
			near(bp.statistic.value, referenceOf(of, 'bp'), 'koenker');
			near(bp.pValue, referenceOf(of, 'bp'), 'koenker_p');
		}
		const jb = checkIn(result, 'residual.normality');
		if (jb.statistic) {
			near(jb.statistic.value, referenceOf(of, 'jb'), 'jb');
			near(jb.pValue, referenceOf(of, 'jb'), 'p');
		}
		for (const { about, statistic, pValue } of checkIn(result, 'residual.arch').parts ?? []) {
			const reference = referenceOf(of, `arch.${about.slice(6)}`);
			near(statistic!.value, reference, 'lm');
			near(pValue, reference, 'lm_p');
		}
		const reset = checkIn(result, 'residual.functional-form');
		if (reset.statistic) near(reset.statistic.value, referenceOf(of, 'reset.23'), 'F');
	});

	test('bounds and ECM t', () => {
		const bounds = checkIn(result, 'cointegration.bounds');
		const reference = referenceOf(of, result.specification.longRun.trend ? 'pss.5' : 'pss.3');
		if (bounds.statistic) near(bounds.statistic.value, reference, 'F');
		const t = checkIn(result, 'cointegration.ecm-t');
		near(t.statistic!.value, reference, 't');
	});

	test('CUSUM and CUSUM of squares', () => {
		const cusum = checkIn(result, 'stability.cusum');
		if (cusum.statistic) {
			near(cusum.statistic.value, referenceOf(of, 'cusum'), 'stat');
			near(cusum.pValue, referenceOf(of, 'cusum'), 'p');
		}
		const squares = checkIn(result, 'stability.cusumsq');
		if (squares.statistic) near(squares.statistic.value, referenceOf(of, 'cusumsq'), 'max_dev');
	});
});

describe.each(cases.map((of) => [of.case, of] as const))('two-step and series, %s', (_, of) => {
	const result = runBattery(
		requestOf(caseSpecification(of, 'two-step'), { settings: widerSearch }),
		policy,
		caseData(of)
	);

	test('second step and static relation', () => {
		const reference = of.checks.find(
			({ method, params }) =>
				method === 'ecm_two_step' &&
				params['static_det'] === (result.specification.longRun.trend ? 'ct' : 'c')
		);
		if (!reference) return expect(of.case).toBe('no two-step reference');
		for (const { term, value, se } of result.estimates!.equation.terms) {
			near(value, reference, 'coef', term.code);
			near(se, reference, 'se', term.code);
		}
		near(result.estimates!.speed.value, reference, 'lambda');
	});

	test('Engle-Granger statistic, p-value and critical values at the chosen lag', () => {
		const check = checkIn(result, 'cointegration.engle-granger');
		const det = result.specification.longRun.trend ? 'ct' : 'c';
		const reference = of.checks.find(({ id }) => id === `eg.${det}.${String(check.parameters['lags'])}`);
		if (!reference) return;
		near(check.statistic!.value, reference, 'adf_stat');
		for (const { level, value } of check.criticalValues!) near(value, reference, 'crit_Tm1', level);
		const table = check.parts?.find(({ about }) => about === 'table');
		near(table?.pValue ?? check.pValue, reference, 'pvalue');
	});

	test('Dickey-Fuller and KPSS of every series', () => {
		let found = 0;
		const adf = checkIn(result, 'integration.adf');
		const kpss = checkIn(result, 'integration.kpss');
		for (const { name } of result.specification.series) {
			for (const form of ['level', 'difference']) {
				const on = form === 'level' ? name : `diff(${name})`;
				const auto = of.checks.find(({ id }) => id === `adf_auto.${on}.c.AIC`);
				const part = partIn(adf, name, { form });
				if (auto && part.parameters?.['maxLag'] === auto.params['pmax']) {
					near(part.statistic!.value, auto, 'stat');
					near(part.pValue, auto, 'pvalue');
					expect(part.parameters?.['lags']).toBe(auto.values['selected_lag']);
					found++;
				}
				const hobijn = of.checks.find(({ id }) => id === `kpss_auto.${on}.c`);
				if (!hobijn) continue;
				const lagged = partIn(kpss, name, { form, rule: 'hobijn' });
				near(lagged.statistic!.value, hobijn, 'stat');
				expect(lagged.parameters?.['lag']).toBe(hobijn.params['lag']);
				found++;
			}
		}
		expect(found).toBeGreaterThan(0);
	});
});

test('every case contributed figures', () => {
	expect(cases.map((of) => of.case)).toContain('macrodata');
	expect(cases.map((of) => of.case)).toContain('denmark');
	expect(compared).toBeGreaterThan(800);
});
