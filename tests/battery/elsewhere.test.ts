import { describe, expect, test } from 'vitest';
import { runBattery } from '$lib/battery/run-battery';
import type { Specification } from '$lib/domain/specification';
import { loadCase } from '../reference/reference';
import { caseData, caseSpecification, checkIn, policy, requestOf } from './cases';
import { simulated, simulatedSpecification } from './simulated';

const of = loadCase('macrodata');
const data = caseData(of);
const spec = caseSpecification(of, 'two-step');
const estimated = runBattery(requestOf(spec), policy, data);

/** Our own estimates as somebody else's claims, at full precision. */
const asClaims = (): Specification['claimed'] => ({
	source: 'another program',
	coefficients: [...estimated.estimates!.longRun, ...estimated.estimates!.equation.terms].map(
		({ term, value }) => ({
			term: term.code,
			value: value.toPrecision(17)
		})
	)
});

describe('coefficients from elsewhere', () => {
	const given = runBattery(
		requestOf({ ...spec, estimator: { kind: 'elsewhere' }, claimed: asClaims() }),
		policy,
		data
	);

	test('the residuals are those of the given coefficients', () => {
		const ours = estimated.model!.residuals;
		given.model!.residuals.forEach((residual, i) => {
			if (residual === null) expect(ours[i]).toBeNull();
			else expect(residual).toBeCloseTo(ours[i]!, 12);
		});
	});

	test('what needs no refit is computed', () => {
		for (const id of [
			'residual.autocorrelation',
			'residual.portmanteau',
			'residual.arch',
			'residual.normality'
		]) {
			expect(checkIn(given, id).statistic!.value!, id).toBeCloseTo(
				checkIn(estimated, id).statistic!.value!,
				6
			);
		}
		expect(checkIn(given, 'adjustment.sign').verdict).toBe('holds');
		expect(checkIn(given, 'residual.stationarity-held').verdict).not.toBe('not assessable');
		expect(given.estimates!.speed.value).toBeCloseTo(estimated.estimates!.speed.value, 12);
	});

	test('what follows estimates over the sample is not assessable: given', () => {
		for (const id of [
			'cointegration.engle-granger',
			'cointegration.ecm-t',
			'residual.stationarity-refit',
			'replication.coefficients',
			'stability.sup-f',
			'stability.cusum',
			'adjustment.significance',
			'long-run.precision'
		])
			expect(checkIn(given, id), id).toMatchObject({ verdict: 'not assessable', reason: 'given' });
	});
});

describe('an imposed long run', () => {
	const series = simulated({ seed: 3, n: 160, speed: 0.3, slope: [1, 1], breakAt: 160 });
	const run = (slope: number) =>
		runBattery(
			requestOf(
				simulatedSpecification(series, {
					estimator: { kind: 'imposed', imposed: { constant: 0, slopes: [{ series: 'x', value: slope }] } }
				})
			),
			policy,
			series
		);

	test('the true relation: the held gap is stationary and decides cointegration', () => {
		const result = run(1);
		expect(checkIn(result, 'residual.stationarity-held').verdict).toBe('holds');
		expect(result.groups.find(({ group }) => group === 'cointegration')).toMatchObject({
			primary: 'residual.stationarity-held',
			verdict: 'holds'
		});
		expect(result.estimates!.longRun.map(({ value, se }) => [value, se])).toEqual([
			[0, null],
			[1, null]
		]);
	});

	test('a wrong relation: stationarity of the gap is not shown', () => {
		expect(checkIn(run(-2), 'residual.stationarity-held').verdict).not.toBe('holds');
	});
});

describe('claimed coefficients', () => {
	const claim = (value: string) =>
		runBattery(
			requestOf({ ...spec, claimed: { source: 'table 3', coefficients: [{ term: 'ec.l1', value }] } }),
			policy,
			data
		);
	const ours = -estimated.estimates!.speed.value;

	test.each([
		['three digits, rounded', ours.toFixed(3), 'holds'],
		['one unit of the last digit off', (ours + 0.001).toFixed(3), 'query'],
		['another number', (2 * ours).toFixed(3), 'fails']
	])('%s', (_, value, verdict) => {
		const result = claim(value);
		expect(checkIn(result, 'replication.coefficients').verdict).toBe(verdict);
		expect(result.replication[0]).toMatchObject({
			claimed: value,
			decimals: 3,
			replicates: verdict === 'holds'
		});
	});
});
