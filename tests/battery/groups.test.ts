import { describe, expect, test } from 'vitest';
import { familyOf, holm } from '$lib/battery/family';
import { groupsOf } from '$lib/battery/groups';
import type { Verdict } from '$lib/domain/run';
import type { Check } from '$lib/domain/run-result';
import { policy } from './cases';

const check = (id: string, verdict: Verdict | null, pValue?: number): Check => ({
	id,
	group: id.split('.')[0]!,
	verdict,
	...(verdict === 'not assessable' && { reason: 'too-short' as const }),
	...(pValue !== undefined && { pValue }),
	parameters: {},
	source: '',
	thresholdFrom: []
});

const residual = (primary: Verdict, ...others: Verdict[]) =>
	groupsOf(policy, 'two-step', [
		check('residual.autocorrelation', primary),
		...['residual.arch', 'residual.normality'].slice(0, others.length).map((id, i) => check(id, others[i]!))
	])[0];

describe('a group has the verdict of its primary check', () => {
	test.each([
		['holds', ['holds', 'holds'], 'holds', []],
		['holds', ['query', 'holds'], 'query', ['residual.arch']],
		['holds', ['fails', 'query'], 'query', ['residual.arch', 'residual.normality']],
		['holds', ['not assessable', 'holds'], 'holds', []],
		['query', ['holds', 'holds'], 'query', []],
		['query', ['fails', 'holds'], 'query', []],
		['fails', ['holds', 'holds'], 'fails', []],
		['not assessable', ['holds', 'holds'], 'not assessable', []]
	] as const)('primary %s, others %o: %s', (primary, others, verdict, loweredBy) =>
		expect(residual(primary, ...others)).toMatchObject({ verdict, loweredBy })
	);

	test.each([
		['two-step', 'cointegration.engle-granger'],
		['one-step', 'cointegration.ecm-t'],
		['imposed', 'residual.stationarity-held']
	] as const)('%s: %s decides cointegration', (kind, primary) => {
		const checks = [
			check('cointegration.engle-granger', 'holds'),
			check('cointegration.ecm-t', 'query'),
			check('residual.stationarity-held', 'fails')
		];
		expect(groupsOf(policy, kind, checks).find(({ group }) => group === 'cointegration')?.primary).toBe(
			primary
		);
	});

	test('a group that the policy gives no primary is shown, not judged', () => {
		expect(groupsOf(policy, 'two-step', [check('family.false-alarms', null)])).toEqual([]);
	});
});

describe('family of checks', () => {
	test('Holm’s step-down values (example of Holm 1979: p (n - rank + 1), never falling)', () => {
		expect(holm([0.01, 0.04, 0.03])).toEqual([0.03, 0.06, 0.06]);
		expect(holm([0.5, 0.9])).toEqual([1, 1]);
	});

	test('correlated duplicates count once; what was not assessed does not count', () => {
		const family = familyOf(
			[
				check('residual.autocorrelation', 'fails', 0.001),
				check('residual.portmanteau', 'query', 0.02),
				check('residual.arch', 'not assessable'),
				check('residual.normality', 'holds', 0.6),
				check('long-run.signs', 'fails')
			],
			{ query: 0.05 }
		);
		expect(family).toMatchObject({ judged: 2, alarms: 1 });
		expect(family.expected).toBeCloseTo(0.1, 12);
		expect(family.atLeastOne).toBeCloseTo(1 - 0.95 ** 2, 12);
		expect(family.members.map(({ holm: corrected }) => corrected)).toEqual([0.003, 0.04, 0.6]);
	});
});
