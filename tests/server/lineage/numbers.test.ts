import { markEvidence, readNumber } from '$lib/server/lineage/numbers';
import { describe, expect, it } from 'vitest';

const value = (text: string, mark: '.' | ',' = '.') => {
	const reading = readNumber(text, mark);
	return reading.kind === 'value' ? reading.value : reading.kind === 'missing' ? null : reading.code;
};
const flags = (text: string, mark: '.' | ',' = '.') => {
	const reading = readNumber(text, mark);
	return reading.kind === 'value' ? reading.flags : undefined;
};

describe('readNumber', () => {
	it.each([
		['1.5', 1.5],
		['.5', 0.5],
		['5.', 5],
		['+5', 5],
		['1e5', 100000],
		['1E+300', 1e300],
		['-0.187', -0.187],
		['0.1', 0.1],
		['2710.349', 2710.349]
	])('reads %s', (text, expected) => expect(value(text)).toBe(expected));

	it('reads minus zero as zero', () => {
		expect(Object.is(value('-0.0'), 0)).toBe(true);
		expect(Object.is(value('-0'), 0)).toBe(true);
	});

	it.each(['', '  ', 'NA', 'na', 'NaN', '.', '-', '#N/A', '1.#IND'])(
		'takes "%s" for missing, never for zero',
		(text) => expect(value(text)).toBeNull()
	);

	it.each([
		['Inf', 'not-finite'],
		['-∞', 'not-finite'],
		['1.#INF', 'not-finite'],
		['1e400', 'overflow'],
		['3.5%', 'mark'],
		['€4', 'mark'],
		['1.2e', 'mark'],
		['1.2(p)', 'mark'],
		['1.2*', 'mark'],
		['USD 3', 'mark'],
		['١٢٣', 'digits'],
		['１２', 'digits'],
		['abc', 'number'],
		['=1+1', 'number'],
		['-2+3', 'number'],
		['1 2', 'number'],
		['1.2.3', 'number'],
		['0x10', 'number'],
		['12,34,56', 'number']
	])('refuses %s as %s', (text, code) => expect(value(text)).toBe(code));

	it('takes out separators of thousands only where groups of three fit', () => {
		expect(value('1 234 567.5')).toBe(1234567.5);
		expect(value('1\u00a0234')).toBe(1234);
		expect(value('1\u202f234,5', ',')).toBe(1234.5);
		expect(value("1'234.5")).toBe(1234.5);
		expect(value('1.234.567,8', ',')).toBe(1234567.8);
		expect(value('1,234,567.8')).toBe(1234567.8);
		expect(value('12 34')).toBe('number');
		expect(value('1,23,456.7')).toBe('number');
		expect(flags('1 234')).toEqual(['groups']);
	});

	it('flags what a double cannot hold', () => {
		expect(value('1e-400')).toBe(0);
		expect(flags('1e-400')).toEqual(['underflow']);
		expect(flags('12345678901234567890')).toEqual(['many-digits']);
		expect(flags('0.30000000000000004')).toEqual([]);
	});

	it('reads the typographic minus with a note', () => {
		expect(value('\u22121.5')).toBe(-1.5);
		expect(flags('\u22121.5')).toEqual(['minus-sign']);
	});

	it('reads a decimal comma only when that is the mark', () => {
		expect(value('1,5', ',')).toBe(1.5);
		expect(value('1,5', '.')).toBe('number');
	});

	it('is not slowed by long cells', () => {
		const start = performance.now();
		for (const text of [
			' '.repeat(32_000),
			'1'.repeat(32_000) + 'x',
			'1 '.repeat(16_000),
			'1,'.repeat(16_000)
		])
			readNumber(text, '.');
		expect(performance.now() - start).toBeLessThan(500);
	});
});

describe('markEvidence', () => {
	it.each([
		['1.234,5', ','],
		['1,234.5', '.'],
		['0,5', ','],
		['0,123', ','],
		['12,34', ','],
		['1,234', 'thousand-or-point'],
		['1.234', 'point-or-thousand'],
		['1234.567', '.'],
		['1,234,567', '.'],
		['1.234.567', ','],
		['42', undefined],
		['x,y', undefined]
	])('%s says %s', (text, evidence) => expect(markEvidence(text)).toBe(evidence));
});
