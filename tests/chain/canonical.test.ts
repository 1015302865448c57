import { canonical, NotCanonical, parseCanonical } from '$lib/chain/canonical';
import { textFault } from '$lib/chain/text';
import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import vectors from '../vectors/canonical.json';

const doubleOf = (hex: string): number => Buffer.from(hex, 'hex').readDoubleBE();

describe('canonical JSON (RFC 8785)', () => {
	test.each(vectors.mustEqual)('$name', ({ input, canonical: expected }) => {
		expect(canonical(JSON.parse(input))).toBe(expected);
	});

	test.each(vectors.numbers)('$ieee754 is $text', ({ ieee754, text }) => {
		expect(canonical(doubleOf(ieee754))).toBe(text);
	});

	test.each(vectors.numbersMustRefuse)('%s has no JSON', (hex) => {
		expect(() => canonical(doubleOf(hex))).toThrow(NotCanonical);
	});

	test('halves of surrogate pairs are refused, in values and in keys', () => {
		expect(() => canonical('\ud800')).toThrow(NotCanonical);
		expect(() => canonical({ 'a\udfff': 1 })).toThrow(NotCanonical);
		expect(() => canonical(['\udc00\ud800'])).toThrow(NotCanonical);
	});

	test('text that merely looks like an escape is text', () => {
		expect(canonical('\\ud800')).toBe('"\\\\ud800"');
		expect(canonical('\\\\ud800')).toBe('"\\\\\\\\ud800"');
	});
});

describe('trap-08: the strict reader takes only its own canonical form', () => {
	test('there are 36 texts to refuse', () => expect(vectors.mustRefuse).toHaveLength(36));

	// RFC 8785 itself takes text in any Unicode form: NFC is a rule of entries, judged where their text is.
	const [notComposed, others] = [
		vectors.mustRefuse.filter(({ name }) => name.startsWith('not NFC')),
		vectors.mustRefuse.filter(({ name }) => !name.startsWith('not NFC'))
	];

	test.each(others)('refuses: $name', ({ utf8Hex }) => {
		expect(() => parseCanonical(Buffer.from(utf8Hex, 'hex'))).toThrow(NotCanonical);
	});

	test.each(notComposed)('entries refuse: $name', ({ utf8Hex }) => {
		const strings = Object.values(parseCanonical(Buffer.from(utf8Hex, 'hex')) as Record<string, string>);
		expect(strings.map((text) => textFault(text, 'long'))).toContain('is not in Unicode form NFC');
	});

	test.each(vectors.mustEqual)('takes: $name', ({ canonical: text }) => {
		expect(canonical(parseCanonical(Buffer.from(text)))).toBe(text);
	});

	test('any JSON value survives the round trip', () => {
		fc.assert(
			fc.property(fc.jsonValue({ maxDepth: 4 }), (value) => {
				const text = canonical(value);
				expect(canonical(parseCanonical(Buffer.from(text)))).toBe(text);
			})
		);
	});

	test('one changed byte is either refused or says something else', () => {
		const text = Buffer.from(canonical({ a: [1.5, true, 'é'], b: { c: 'x' } }));
		for (let at = 0; at < text.length; at++)
			for (let bit = 0; bit < 8; bit++) {
				const other = Buffer.from(text);
				other[at] = other[at]! ^ (1 << bit);
				let read: unknown;
				try {
					read = parseCanonical(other);
				} catch {
					continue;
				}
				expect(Buffer.from(canonical(read)).equals(other)).toBe(true);
			}
	});
});
