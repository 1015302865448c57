import type { ParsedTable } from '$lib/domain/lineage';
import { compareVintages } from '$lib/domain/lineage-comparison';
import { integrityFindings } from '$lib/domain/lineage-integrity';
import { describe, expect, it } from 'vitest';

const table = (values: readonly (number | null)[], name = 'a', from = 2000): ParsedTable => ({
	frequency: 'annual',
	periods: values.map((_, i) => String(from + i)),
	columns: [{ name, values }],
	notes: []
});
const compared = (before: readonly (number | null)[], after: readonly (number | null)[]) =>
	compareVintages(table(before), table(after)).columns[0];

const base = [100, 103.7, 104.5, 106.1, 110.2, 113.9];

describe('compareVintages', () => {
	it('sees equal figures, and new periods beside them', () => {
		expect(compared(base, [...base, 117])).toMatchObject({
			change: 'unchanged',
			common: 6,
			newPeriods: ['2006'],
			lostPeriods: []
		});
	});
	it('recognises a rebasing by one ratio up to published rounding', () => {
		const rebased = base.map((value) => Number((value * 1.2345).toFixed(3)));
		const column = compared(base, rebased);
		expect(column?.change).toBe('rescaled');
		expect(column?.by).toBeCloseTo(1.2345, 4);
	});
	it('recognises a shift', () => {
		const column = compared([-1, 2, -3, 4, 1], [1.5, 4.5, -0.5, 6.5, 3.5]);
		expect(column).toMatchObject({ change: 'shifted', by: 2.5 });
	});
	it('lists revised points, the largest first, in spreads of the changes', () => {
		const revised = [...base];
		revised[2] = 105;
		revised[4] = 108;
		const column = compared(base, revised);
		expect(column?.change).toBe('revised');
		expect(column?.revised.map(({ period }) => period)).toEqual(['2004', '2002']);
		// Changes 3.7, 0.8, 1.6, 4.1, 3.7: mean 2.78, sum of squared distances 8.748, over 4.
		expect(column?.revised[0]?.size).toBeCloseTo(2.2 / Math.sqrt(8.748 / 4), 12);
	});
	it('names columns that came and went, and periods that were lost', () => {
		const columns = compareVintages(table(base, 'old'), table(base, 'new')).columns;
		expect(columns.map(({ name, change }) => [name, change])).toEqual([
			['new', 'added'],
			['old', 'dropped']
		]);
		expect(compared(base, base.slice(0, 4))).toMatchObject({ lostPeriods: ['2004', '2005'] });
	});
});

describe('integrityFindings', () => {
	const codes = (values: readonly (number | null)[], from = 2000) =>
		integrityFindings(table(values, 'a', from)).map(({ code }) => code);

	it('says nothing of sound figures', () => expect(codes(base)).toEqual([]));
	it('sees where figures start, end and lack', () =>
		expect(codes([null, 1, null, 3, 7, null])).toEqual(['starts-at', 'ends-at', 'inner-missing']));
	it('sees columns without figures, constant ones and equal ones', () => {
		expect(codes([null, null, null, null])).toEqual(['all-missing']);
		expect(codes([2, 2, 2, 2])).toEqual(['constant']);
		const twins: ParsedTable = {
			...table(base),
			columns: [
				{ name: 'a', values: base },
				{ name: 'b', values: base }
			]
		};
		expect(integrityFindings(twins)).toEqual([
			expect.objectContaining({ code: 'equal-columns', column: 'b' })
		]);
	});
	it('suspects interpolation after more than three equal changes, not after three', () => {
		expect(codes([1, 1.1, 1.2, 1.3, 9])).toEqual([]);
		expect(codes([1, 1.1, 1.2, 1.3, 1.4, 9])).toEqual(['interpolated']);
		expect(codes([5, 4, 4, 4, 4, 4, 9])).toEqual([]);
	});
	it('does not count changes across a missing figure', () =>
		expect(codes([1, 2, null, 4, 5, 6, 9])).toEqual(['inner-missing']));
	it('lists gaps and figures before 1900', () => {
		const gapped: ParsedTable = { ...table(base), periods: ['1899', '1900', '1901', '1905', '1906', '1907'] };
		expect(integrityFindings(gapped).map(({ code, message }) => [code, message])).toEqual([
			['gap', '3 periods are missing: 1902 to 1904.'],
			['before-1900', 'The data start in 1899.']
		]);
	});
});
