import { describe, expect, test } from 'vitest';
import { runBattery } from '$lib/battery/run-battery';
import { checkSentence } from '$lib/battery/sentences';
import { checkIn, partIn, policy, requestOf } from './cases';
import { simulated, simulatedSpecification, type Simulation } from './simulated';

/** y follows x with speed 0.3; values 0 and 1 are held from the sample up to row `known`. */
const heldRun = (simulation: Partial<Simulation>, known: number) => {
	const data = simulated({ seed: 3, n: 160, speed: 0.3, slope: [1, 1], breakAt: 160, ...simulation });
	const held = {
		version: 'M-001/1',
		constant: 0,
		slopes: [{ series: 'x', value: 1 }],
		through: data.periods[known - 1]!
	};
	const result = runBattery(requestOf(simulatedSpecification(data), { held }), policy, data);
	return checkIn(result, 'residual.stationarity-held');
};

describe('values of an approved version held on new data', () => {
	test('the relation goes on: a unit root is rejected on the new periods alone, with one-variable tables', () => {
		const check = heldRun({}, 80);
		expect(check.verdict).toBe('holds');
		expect(check.parameters).toMatchObject({ coefficients: 'held', overlap: false, tableVariables: 1 });
		// Whole window, old sample included: the conservative row, one more variable a driver.
		expect(partIn(check, 'whole window').parameters).toMatchObject({ overlap: true, tableVariables: 2 });
		expect(partIn(check, 'boundary').parameters).toMatchObject({ crossedAt1: false, known: 80 });
	});

	test('too few new periods: not assessable, never holds', () => {
		const check = heldRun({}, 150);
		expect(check).toMatchObject({ verdict: 'not assessable', reason: 'too-short' });
		expect(checkSentence(check)).toContain('10 new periods; at least 24 are needed');
	});

	test('the relation moved after approval: the boundary is crossed and the check fails, on few periods too', () => {
		const check = heldRun({ slope: [1, 4], breakAt: 141 }, 140);
		expect(partIn(check, 'boundary').parameters).toMatchObject({ crossedAt1: true });
		expect(check.verdict).toBe('fails');
		expect(checkSentence(check)).toContain('has crossed its boundary');
	});

	test('three new periods are too few even for the boundary', () => {
		const check = heldRun({ slope: [1, 4], breakAt: 141 }, 157);
		expect(check.verdict).toBe('not assessable');
		expect(check.parts?.some(({ about }) => about === 'boundary')).toBe(false);
	});
});
