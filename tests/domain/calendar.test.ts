import { describe, expect, it } from 'vitest';
import { addMonths, dateIn, daysBetween, isCalendarDate } from '$lib/domain/calendar';

describe('calendar dates', () => {
	it.each([
		['2026-03-14', 12, '2027-03-14'],
		['2024-02-29', 12, '2025-02-28'],
		['2024-02-29', 48, '2028-02-29'],
		['2096-02-29', 48, '2100-02-28'], // 2100 is no leap year
		['2026-01-31', 1, '2026-02-28'],
		['2026-12-31', 2, '2027-02-28'],
		['2026-03-31', -1, '2026-02-28'],
		['2026-01-15', -12, '2025-01-15']
	])('%s moved by %i months is %s', (date, months, expected) => {
		expect(addMonths(date, months)).toBe(expected);
	});

	it('takes the date of an instant in the zone, not in UTC', () => {
		expect(dateIn('UTC', '2026-03-14T23:30:00.000Z')).toBe('2026-03-14');
		expect(dateIn('Europe/Helsinki', '2026-03-14T23:30:00.000Z')).toBe('2026-03-15');
		expect(dateIn('America/New_York', new Date('2026-01-01T03:00:00.000Z'))).toBe('2025-12-31');
	});

	it('counts days over leap days and over the change of summer time', () => {
		expect(daysBetween('2024-02-28', '2024-03-01')).toBe(2);
		expect(daysBetween('2026-03-28', '2026-03-30')).toBe(2);
		expect(daysBetween('2026-12-01', '2026-11-20')).toBe(-11);
	});

	it('knows which dates exist', () => {
		expect(isCalendarDate('2024-02-29')).toBe(true);
		for (const absent of ['2023-02-29', '2026-13-01', '2026-00-10', '2026-1-1', '2026-04-31', '20260101'])
			expect(isCalendarDate(absent)).toBe(false);
		expect(() => addMonths('2023-02-29', 1)).toThrow('2023-02-29');
	});
});
