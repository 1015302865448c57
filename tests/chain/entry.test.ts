import { BadEntry, entryText, limits, readEntry, type Envelope } from '$lib/chain/entry';
import { describe, expect, test } from 'vitest';

const entry: Envelope = {
	seq: 12,
	at: '2026-03-02T09:00:00.000Z',
	type: 'model.registered',
	v: 1,
	actor: 'p_abcdefghijklmnopqrstuvwxyz',
	subjects: [
		{ n: 1, prev: null, ref: 'M-001' },
		{ n: 2, prev: 3, ref: 'M-002' }
	],
	payload: { name: 'Deposit volumes', note: 'first line\n\tsecond' },
	auth: { means: 'passkey', rule: 'model.register' },
	request: 'r1'
};

const withPayload = (payload: object): Envelope => ({ ...entry, payload });
const nested = (depth: number): object => (depth === 0 ? {} : { a: nested(depth - 1) });

const fault = (value: Envelope): string => {
	try {
		entryText(value);
	} catch (cause) {
		if (cause instanceof BadEntry) return `${cause.fault.pointer} ${cause.fault.message}`;
		throw cause;
	}
	return 'none';
};

test('an entry is written and read back', () => {
	expect(readEntry(Buffer.from(entryText(entry)))).toEqual(entry);
});

test('minus nought is written as nought, what is undefined is left out', () => {
	expect(entryText(withPayload({ a: -0, b: undefined }))).toContain('"payload":{"a":0}');
});

describe('refused, with the place named', () => {
	test.each<[string, Envelope, string]>([
		['a null', withPayload({ a: [1, null] }), '/payload/a/1 is null'],
		['NaN', withPayload({ a: Number.NaN }), '/payload/a is not a finite number'],
		['an infinity', withPayload({ a: Infinity }), '/payload/a is not a finite number'],
		['an integer beyond 2^53', withPayload({ a: 2 ** 53 }), '/payload/a is an integer beyond'],
		['NUL', withPayload({ a: 'x\u0000' }), '/payload/a holds the control character U+0000 at position 2'],
		['a C1 control', withPayload({ a: '\u0085' }), '/payload/a holds the control character U+0085'],
		['a carriage return', withPayload({ a: 'x\r\n' }), '/payload/a holds the control character U+000D'],
		['text not in NFC', withPayload({ a: 'e\u0301' }), '/payload/a is not in Unicode form NFC'],
		['half a surrogate pair', withPayload({ a: '\ud800' }), '/payload/a holds half of a surrogate pair'],
		['a key with a capital', withPayload({ Bad: 1 }), '/payload/Bad is not a key'],
		['the key __proto__', withPayload(JSON.parse('{"__proto__":1}')), '/payload/__proto__ is not a key'],
		['a key with a slash', withPayload({ 'a/b': 1 }), '/payload/a~1b is not a key'],
		['a long string', withPayload({ a: 'x'.repeat(limits.text + 1) }), '/payload/a is longer than 16384'],
		['many items', withPayload({ a: Array(limits.items + 1).fill(0) }), '/payload/a holds more than 4096'],
		['deep nesting', withPayload(nested(limits.depth)), 'is nested deeper than 16'],
		['many bytes', withPayload({ a: Array(5).fill('x'.repeat(14_000)) }), ' has 70'],
		['a function', withPayload({ a: () => 1 }), '/payload/a is function'],
		['a time without milliseconds', { ...entry, at: '2026-03-02T09:00:00Z' }, '/at is missing or malformed'],
		['a day that is not', { ...entry, at: '2026-02-30T09:00:00.000Z' }, '/at is missing or malformed'],
		['a type in capitals', { ...entry, type: 'Model.registered' }, '/type'],
		['a name as actor', { ...entry, actor: 'Anna' }, '/actor'],
		['a negative folio', { ...entry, seq: -1 }, '/seq'],
		['no subject', { ...entry, subjects: [] }, '/subjects must be 1 to 64'],
		[
			'a direction mark in a reference',
			{ ...entry, subjects: [{ n: 1, prev: null, ref: 'M\u202e' }] },
			'/subjects/0'
		],
		[
			'subjects out of order',
			{ ...entry, subjects: [...entry.subjects].reverse() },
			'/subjects/1 is out of order'
		],
		[
			'a subject twice',
			{ ...entry, subjects: [entry.subjects[0]!, entry.subjects[0]!] },
			'/subjects/1 is out of order'
		],
		[
			'a count without predecessor',
			{ ...entry, subjects: [{ n: 2, prev: null, ref: 'M-001' }] },
			'/subjects/0 has a count'
		],
		[
			'a predecessor that is later',
			{ ...entry, subjects: [{ n: 2, prev: 12, ref: 'M-001' }] },
			'/subjects/0 has a pred'
		],
		['a field too many', { ...entry, colour: 'red' } as Envelope, '/colour is not a field'],
		['a missing request', { ...entry, request: '' }, '/request']
	])('%s', (_, value, words) => expect(fault(value)).toContain(words));
});

describe('trap-08: the strict reader of entries', () => {
	const text = entryText(entry);

	test.each([
		['a blank', text.replace('"v":1', '"v": 1')],
		['1.0 for 1', text.replace('"v":1', '"v":1.0')],
		['a duplicate key', text.replace('"v":1', '"v":1,"v":1')],
		[
			'keys out of order',
			text.replace('{"actor":"p_abcdefghijklmnopqrstuvwxyz",', '{').replace('}$', ',"actor":"system"}')
		],
		['a byte order mark', `\ufeff${text}`],
		['a newline at the end', `${text}\n`]
	])('refuses %s', (_, other) => {
		expect(other).not.toBe(text);
		expect(() => readEntry(Buffer.from(other))).toThrow(BadEntry);
	});

	test('broken UTF-8 is refused', () => {
		const bytes = Buffer.from(text);
		bytes[bytes.indexOf('Deposit')] = 0xff;
		expect(() => readEntry(bytes)).toThrow('not canonical');
	});
});
