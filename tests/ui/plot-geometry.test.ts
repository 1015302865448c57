import { scaleLinear } from 'd3-scale';
import { describe, expect, it } from 'vitest';
import { valueTicks, yearTicks } from '$lib/ui/plots/axis';
import { crossing } from '$lib/ui/plots/crossing';
import { datedLines } from '$lib/ui/plots/dated';
import { bandPath, downBandPath, downLinePath, extent, linePath, spread } from '$lib/ui/plots/paths';

const quarters = (from: number, count: number): string[] =>
	Array.from({ length: count }, (_, i) => `${from + Math.floor(i / 4)}-Q${(i % 4) + 1}`);
const same = (value: number): number => value;

describe('ticks', () => {
	it('names round years at the periods that open them', () => {
		expect(yearTicks(quarters(2005, 84), 6)).toEqual([
			{ index: 12, label: '2008' },
			{ index: 28, label: '2012' },
			{ index: 44, label: '2016' },
			{ index: 60, label: '2020' },
			{ index: 76, label: '2024' }
		]);
	});

	it('works on years and months, and on a sample shorter than its step', () => {
		expect(yearTicks(['1900', '1901', '1902'], 5).map(({ label }) => label)).toEqual([
			'1900',
			'1901',
			'1902'
		]);
		expect(yearTicks(['2001-11', '2001-12', '2002-01'], 5)).toEqual([{ index: 2, label: '2002' }]);
		expect(yearTicks(['2001-Q2', '2001-Q3'], 5)).toEqual([]);
	});

	it('gives values the same decimals', () => {
		const labels = (low: number, high: number) =>
			valueTicks(scaleLinear([low, high], [0, 1]), 4).map(({ label }) => label);
		expect(labels(0, 0.3)).toEqual(['0.0', '0.1', '0.2', '0.3']);
		expect(labels(-4000, 0)).toEqual(['−4\u2009000', '−3\u2009000', '−2\u2009000', '−1\u2009000', '0']);
	});
});

describe('paths', () => {
	it('break at a missing value', () => {
		expect(linePath([1, 2, null, 4, 5], same, same)).toBe('M0,1L1,2M3,4L4,5');
		expect(bandPath([1, null], [3, 4], same, same)).toBe('M0,1L0,3Z');
	});

	it('run down about a vertical', () => {
		expect(downLinePath([1, null, -2, -1], same, same)).toBe('M1,0ZM-2,2L-1,3');
		expect(downBandPath([1, 2], same, same)).toBe('M1,0L2,1L0,1L0,0Z');
	});

	it('know their extent, also of a constant and of nothing', () => {
		expect(extent([1, null, 5], [-2])).toEqual([-2, 5]);
		expect(extent([3, 3])).toEqual([2, 4]);
		expect(extent([])).toEqual([0, 1]);
	});
});

describe('labels', () => {
	it('move apart downwards, keeping their order', () => {
		expect(spread([10, 12, 11, 50], 14)).toEqual([10, 38, 24, 52]);
	});

	it('of dates outside the periods are left out, neighbours take turns', () => {
		const marks = ['2006-Q2', '1999-Q1', '2005-Q1', '2005-Q2', '2006-Q1'].map((period) => ({
			period,
			label: 'x'
		}));
		const placed = datedLines(quarters(2005, 8), marks);
		expect(placed.map(({ index, turned, row }) => [index, turned, row])).toEqual([
			[0, false, 0],
			[1, false, 1],
			[4, true, 1],
			[5, true, 0]
		]);
	});
});

describe('crossings', () => {
	it('count positions outside and name the first', () => {
		expect(crossing([0, 3, 1, -4], [-2, -2, -2, -2], [2, 2, 2, 2])).toEqual({ count: 2, first: 1 });
	});

	it('take a value on the bound as inside, also by rounding', () => {
		expect(crossing([2, 0.1 + 0.2], [-2, 0], [2, 0.3])).toEqual({ count: 0, first: null });
	});
});
