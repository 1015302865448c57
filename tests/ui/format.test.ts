import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
	countOf,
	formatBytes,
	formatCount,
	formatDue,
	formatInstant,
	formatNumber,
	formatP,
	formatPercent,
	formatSignificant,
	MINUS,
	NO_BREAK,
	THIN
} from '$lib/ui/format';

describe('numbers', () => {
	it.each([
		[0.3271, {}, '0.327'],
		[-0.187, {}, '−0.187'],
		[13.5, { decimals: 1, sign: true }, '+13.5'],
		[2400, { decimals: 0 }, '2\u2009400'],
		[-1234567.891, { decimals: 2 }, '−1\u2009234\u2009567.89'],
		[-0.0002, {}, '0.000'],
		[0.0002, { sign: true }, '0.000'],
		[999.9996, {}, '1\u2009000.000'],
		[-2.5e20, { decimals: 1 }, '−2.5 × 10²⁰'.replaceAll(' ', NO_BREAK)]
	] as const)('%d is written %s', (value, style, text) => {
		expect(formatNumber(value, style)).toBe(text);
	});

	it('refuses what is not a finite number', () => {
		expect(() => formatNumber(NaN)).toThrow(/finite/);
		expect(() => formatNumber(-Infinity)).toThrow(/finite/);
	});

	it('reads back to the same number at its decimals', () => {
		fc.assert(
			fc.property(
				fc.double({ min: -1e12, max: 1e12, noNaN: true }),
				fc.integer({ min: 0, max: 6 }),
				(value, decimals) => {
					const read = Number(formatNumber(value, { decimals }).replaceAll(THIN, '').replace(MINUS, '-'));
					expect(Math.abs(read - value)).toBeLessThanOrEqual(
						0.5000001 * 10 ** -decimals + Math.abs(value) * 1e-15
					);
				}
			)
		);
	});
});

describe('significant digits', () => {
	it.each([
		[0.5, '0.500'],
		[2.2041, '2.20'],
		[32.71, '32.7'],
		[364.62, '365'],
		[99950, '99\u2009950'],
		[0.09996, '0.100'],
		[-0.000123456, '−0.000123'],
		[0, '0']
	])('%d is written %s', (value, text) => {
		expect(formatSignificant(value)).toBe(text);
	});

	it('goes to powers of ten for the very small', () => {
		expect(formatSignificant(1.234e-9)).toBe(`1.23${NO_BREAK}×${NO_BREAK}10⁻⁹`);
	});
});

describe('p-values', () => {
	it.each([
		[0, `<${NO_BREAK}0.001`],
		[0.00099, `<${NO_BREAK}0.001`],
		[0.001, '0.001'],
		[0.5566, '0.557'],
		[1, '1.000']
	])('%d is written %s', (p, text) => {
		expect(formatP(p)).toBe(text);
	});

	it('refuses what is no probability', () => {
		expect(() => formatP(1.01)).toThrow(/between 0 and 1/);
		expect(() => formatP(NaN)).toThrow(/between 0 and 1/);
	});
});

describe('dates, counts and sizes', () => {
	it('names the zone of an instant', () => {
		expect(formatInstant('2026-12-01T14:02:59.999Z')).toBe('2026-12-01 14:02 UTC');
		expect(formatInstant(0)).toBe('1970-01-01 00:00 UTC');
		expect(() => formatInstant('yesterday')).toThrow(RangeError);
	});

	it('counts days over months and years', () => {
		expect(formatDue('2026-12-01', '2027-03-01')).toBe('90 days');
		expect(formatDue('2026-12-01', '2026-12-31')).toBe('30 days');
		expect(formatDue('2026-12-01', '2026-12-02')).toBe('1 day');
		expect(formatDue('2026-12-01', '2026-12-01')).toBe('today');
		expect(formatDue('2026-12-01', '2026-11-20')).toBe('11 days over');
	});

	it('writes counts with their nouns and bytes with their unit', () => {
		expect(formatCount(10482)).toBe('10\u2009482');
		expect(countOf(1, 'result')).toBe('1 result');
		expect(countOf(0, 'entry', 'entries')).toBe('0 entries');
		expect(formatBytes(812)).toBe(`812${NO_BREAK}B`);
		expect(formatBytes(7_610_000)).toBe(`7.6${NO_BREAK}MB`);
		expect(formatPercent(0.3271)).toBe(`32.7${NO_BREAK}%`);
	});
});
