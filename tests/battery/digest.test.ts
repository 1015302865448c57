import { describe, expect, test } from 'vitest';
import { runBattery } from '$lib/battery/run-battery';
import type { RunRequest } from '$lib/domain/run';
import type { Specification } from '$lib/domain/specification';
import { loadCase } from '../reference/reference';
import { caseData, caseSpecification, policy, requestOf } from './cases';

const of = loadCase('denmark');
const data = caseData(of);
const specification = caseSpecification(of, 'two-step');
const base = requestOf(specification);
const digest = (request: RunRequest, of = data): string => runBattery(request, policy, of).digest;
const first = digest(base);

const changed = (change: Partial<Specification>): RunRequest => requestOf({ ...specification, ...change });

describe('digest of a result', () => {
	test('equal requests have equal digests, whatever the order of their keys', () => {
		expect(digest(structuredClone(base))).toBe(first);
		const reversed = Object.fromEntries(Object.entries(base).reverse()) as unknown as RunRequest;
		expect(digest(reversed)).toBe(first);
	});

	test('a validator who repeats a run gets its digest', () => {
		const validation = runBattery({ ...base, purpose: 'validation' }, policy, data);
		expect(validation.digest).toBe(first);
		expect(validation.request.purpose).toBe('validation');
	});

	test.each([
		['seed', { ...base, seed: 1 }],
		['tier', { ...base, tier: 3 }],
		['vintage', { ...base, vintage: `sha256:${'1'.repeat(64)}` }],
		['engine', { ...base, engine: '0.0.0' }],
		['a setting', { ...base, settings: [{ setting: 'levels/query', value: 0.1, reason: 'stricter' }] }],
		['standard errors', changed({ standardErrors: 'hac' })],
		['sample', changed({ sample: { from: '1974-Q1', to: '1987-Q2' } })],
		[
			'a rationale',
			changed({
				longRun: {
					...specification.longRun,
					constant: true,
					drivers: specification.longRun.drivers.map((driver) => ({ ...driver, rationale: 'another' }))
				}
			})
		]
	] satisfies [string, RunRequest][])('changes with %s', (_, request) =>
		expect(digest(request)).not.toBe(first)
	);

	test('changes with one figure of the data, not with what lies below ten digits', () => {
		const moved = (by: number) => ({
			...data,
			columns: data.columns.map((column, i) =>
				i === 0 ? { ...column, values: column.values.map((v, t) => (t === 20 ? v! * (1 + by) : v)) } : column
			)
		});
		expect(digest(base, moved(1e-6))).not.toBe(first);
		expect(digest(base, moved(0))).toBe(first);
	});

	test('a result is plain finite data', () => {
		const result = runBattery(base, policy, data);
		expect(JSON.parse(JSON.stringify(result))).toEqual(result);
		expect(JSON.stringify(result)).not.toContain(
			'null,null,null,null,null,null,null,null,null,null,null,null'
		);
	});
});
