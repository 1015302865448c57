import { describe, expect, it } from 'vitest';
import { replicate, typedFigure } from '$lib/econometrics/error-correction/replication';
import { made, reasonOf } from '../simulated';

describe('figures as typed', () => {
	it.each([
		['0.1870', 0.187, 4],
		['-0.187', -0.187, 3],
		['\u22120.187', -0.187, 3],
		['\u20130.19', -0.19, 2],
		[' +1.5 ', 1.5, 1],
		['.5', 0.5, 1],
		['12.', 12, 0],
		['12', 12, 0],
		['1.87e-3', 0.00187, 5],
		['1.87E\u22123', 0.00187, 5],
		['12e2', 1200, -2],
		['0.000', 0, 3]
	])('%s', (text, value, decimals) => {
		expect(made(typedFigure(text))).toEqual({ value, decimals });
	});

	it.each(['', '.', '-', '0,187', '1 200', '0.18*', '1.2.3', 'NaN', 'Infinity', '0x10', '1e999', 'e5'])(
		'refuses "%s"',
		(text) => {
			expect(reasonOf(typedFigure(text))).toBe('domain');
		}
	);
});

describe('replication', () => {
	const exact = { absolute: 0, relative: 0 };

	it.each([
		['0.187', 0.1874999, 'rounding'],
		['0.187', 0.1875, 'rounding'],
		['0.19', 0.185, 'rounding'],
		['0.187', 0.18751, 'neither'],
		['0.1870', 0.1874, 'neither'],
		['-0.187', 0.187, 'neither'],
		['12e2', 1249, 'rounding'],
		['0.187', NaN, null],
		['0.0000', 0.00004, 'rounding']
	] as const)('%s against %d', (text, ours, within) => {
		const result = replicate(text, ours, exact);
		if (within === null) expect(reasonOf(result)).toBe('non-finite');
		else expect(made(result).within).toBe(within);
	});

	it('allows the tolerance of the policy beyond the digits', () => {
		expect(made(replicate('0.1870', 0.1874, { absolute: 0, relative: 0.01 })).within).toBe('tolerance');
		expect(made(replicate('0.1870', 0.1874, { absolute: 0.001, relative: 0 })).within).toBe('tolerance');
		expect(made(replicate('0.1870', 0.1874, { absolute: 0.0001, relative: 0.0001 })).within).toBe('neither');
		expect(made(replicate('0.18699999999999999', 0.187, { absolute: 1e-12, relative: 0 })).within).not.toBe(
			'neither'
		);
	});

	it('states the difference with its sign', () => {
		expect(made(replicate('0.50', 0.52, exact)).difference).toBeCloseTo(0.02, 14);
		expect(made(replicate('0.50', 0.52, exact)).rounding).toBeCloseTo(0.005, 14);
	});
});
