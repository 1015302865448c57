import { describe, expect, test } from 'vitest';
import { Cancelled, runBattery } from '$lib/battery/run-battery';
import { checkSentence } from '$lib/battery/sentences';
import { companionSentence } from '$lib/battery/model-sentences';
import type { Specification } from '$lib/domain/specification';
import { loadCase } from '../reference/reference';
import { caseData, caseSpecification, checkIn, policy, requestOf } from './cases';
import { simulated, simulatedSpecification } from './simulated';

const run = (specification: Specification, data: Parameters<typeof runBattery>[2], more = {}) =>
	runBattery(requestOf(specification, more), policy, data);

describe('a sound model', () => {
	const data = simulated({ seed: 3, n: 160, speed: 0.3, slope: [1, 1], breakAt: 160 });
	const result = run(simulatedSpecification(data), data);

	test('cointegration, adjustment, signs and stability hold', () => {
		for (const group of ['data', 'cointegration', 'adjustment', 'long-run', 'residual', 'stability'])
			expect(result.groups.find((each) => each.group === group)?.verdict, group).toBe('holds');
		expect(result.estimates!.speed.value).toBeCloseTo(0.3, 0);
		expect(result.companions[1]!.warning).toBeUndefined();
	});

	test('what was not found is worded as not found', () => {
		expect(checkSentence(checkIn(result, 'stability.sup-f'))).toMatch(/: no sign of a break was found\.$/);
		for (const check of result.checks)
			expect(checkSentence(check)).not.toMatch(/stable|good|strong|excellent/);
	});
});

describe('an overridden setting', () => {
	const data = simulated({ seed: 3, n: 160, speed: 0.3, slope: [1, 1], breakAt: 160 });
	const setting = { setting: 'checks/adjustment.half-life/longest', value: 1, reason: 'a short horizon' };
	const result = run(simulatedSpecification(data), data, { settings: [setting] });

	test('is used, and the policy’s own outcome stands beside it', () => {
		const check = checkIn(result, 'adjustment.half-life');
		expect(check).toMatchObject({ verdict: 'query', because: ['too-slow'], byDefault: { verdict: 'holds' } });
		expect(checkSentence(check)).toContain('Under the policy’s own settings: holds');
		expect(checkIn(result, 'adjustment.sign').byDefault).toBeUndefined();
		expect(result.request.settings).toEqual([setting]);
	});

	test('a line that the policy keeps fixed cannot be overridden', () => {
		const fixed = { setting: 'checks/stability.sup-f/trim', value: 0.1, reason: 'r' };
		expect(() => run(simulatedSpecification(data), data, { settings: [fixed] })).toThrow(
			'does not let a run change'
		);
	});
});

describe('a relation that breaks', () => {
	const data = simulated({ seed: 5, n: 160, speed: 0.4, slope: [1, 0.4], breakAt: 90 });
	const result = run(simulatedSpecification(data), data);

	test('sup-F finds the break near its date', () => {
		const check = checkIn(result, 'stability.sup-f');
		expect(check.verdict).toBe('fails');
		const [year] = String(check.parameters['breakFrom']).split('-');
		// Row 90 is 2002-Q3; a change of the slope shows within a few years.
		expect(Math.abs(Number(year) - 2002)).toBeLessThanOrEqual(4);
		expect(check.plot?.kind).toBe('sup-f');
	});

	test('the group is not held up by the others', () => {
		expect(result.groups.find(({ group }) => group === 'stability')?.verdict).toBe('fails');
	});
});

describe('two unrelated random walks', () => {
	const data = simulated({ seed: 11, n: 200, speed: 0, slope: [1, 1], breakAt: 200, unrelated: true });
	const result = run(simulatedSpecification(data), data);

	test('cointegration is not shown, and the levels carry the plain warning', () => {
		expect(checkIn(result, 'cointegration.engle-granger').verdict).toBe('query');
		expect(checkSentence(checkIn(result, 'cointegration.engle-granger'))).toContain(
			'cointegration is not shown'
		);
		const levels = result.companions.find(({ kind }) => kind === 'levels-only')!;
		expect(levels.warning).toBe('spurious-levels');
		expect(companionSentence(levels)).toContain('wander together without cointegrating');
	});

	test('a t-ratio of the speed is not read', () => {
		const check = checkIn(result, 'adjustment.significance');
		expect(check.verdict).toBe('not assessable');
		expect(check.reason).toBe('needs-cointegration');
	});
});

describe('a short sample', () => {
	const of = loadCase('denmark');
	const specification = { ...caseSpecification(of, 'one-step'), sample: { from: '1974-Q1', to: '1980-Q4' } };
	const result = run(specification, caseData(of));
	const notAssessed = result.checks.filter(({ verdict }) => verdict === 'not assessable');

	test('several checks are not assessable, each with its reason', () => {
		expect(notAssessed.map(({ id }) => id)).toEqual(
			expect.arrayContaining([
				'cointegration.bounds',
				'residual.stationarity-refit',
				'residual.arch',
				'residual.normality',
				'stability.cusum',
				'stability.sup-f'
			])
		);
		for (const check of notAssessed) {
			expect(check.reason).toBeDefined();
			expect(checkSentence(check)).toMatch(/^Not assessable: .+\.$/);
		}
	});

	test('what was not assessed never holds, nor does its group', () => {
		for (const { group, primary, verdict } of result.groups)
			if (notAssessed.some(({ id }) => id === primary)) expect(verdict, group).toBe('not assessable');
	});

	test('short samples are judged by the bootstrap', () => {
		expect(String(checkIn(result, 'cointegration.engle-granger').parameters['judgedBy'])).toMatch(
			/^bootstrap/
		);
	});
});

describe('data that cannot be read', () => {
	const data = simulated({ seed: 3, n: 100, speed: 0.3, slope: [1, 1], breakAt: 100 });
	const withHole = {
		...data,
		columns: data.columns.map((column) => ({
			...column,
			values: column.values.map((value, i) => (i === 40 ? null : value))
		}))
	};

	test('a missing period fails the integrity check and leaves the rest not assessable', () => {
		const result = run(simulatedSpecification(data), withHole);
		expect(checkIn(result, 'data.integrity').verdict).toBe('fails');
		expect(checkSentence(checkIn(result, 'data.integrity'))).toContain('1990-Q1 is missing');
		expect(result.estimates).toBeNull();
		expect(result.refused?.reason).toBe('gap');
		for (const check of result.checks)
			if (check.id !== 'data.integrity' && check.verdict !== null)
				expect(check.verdict).toBe('not assessable');
	});

	test('a column that the data lack is named', () => {
		const other = { ...data, columns: data.columns.filter(({ name }) => name !== 'x') };
		expect(() => run(simulatedSpecification(data), other)).toThrow('The data have no column x; they have y.');
	});
});

describe('progress and cancelling', () => {
	const data = simulated({ seed: 3, n: 100, speed: 0.3, slope: [1, 1], breakAt: 100 });

	test('progress names each check and ends complete', () => {
		const seen: [number, number, string][] = [];
		runBattery(requestOf(simulatedSpecification(data)), policy, data, {
			progress: (...step) => seen.push(step)
		});
		expect(seen[0]).toEqual([0, 27, 'data.integrity']);
		expect(seen.at(-1)).toEqual([27, 27, '']);
	});

	test('a cancelled run ends between two checks', () => {
		let asked = 0;
		const hooks = { cancelled: () => ++asked > 3 };
		expect(() => runBattery(requestOf(simulatedSpecification(data)), policy, data, hooks)).toThrow(Cancelled);
		expect(asked).toBe(4);
	});
});
