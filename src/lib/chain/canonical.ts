import serialize from 'canonicalize';

/** Bytes that are not the one canonical form of a JSON value. */
export class NotCanonical extends Error {
	override readonly name = 'NotCanonical';
}

/**
 * Canonical JSON (RFC 8785). Undefined members are left out; −0 is written 0.
 * @throws NotCanonical for what JSON cannot say: NaN, infinities, half surrogate pairs, undefined.
 */
export const canonical = (value: unknown): string => {
	let text: string | undefined;
	try {
		text = serialize(value);
	} catch (cause) {
		throw new NotCanonical(cause instanceof Error ? cause.message : 'not serialisable', { cause });
	}
	if (text === undefined) throw new NotCanonical('there is no value');
	// JSON.stringify escapes lone surrogates only, so that a plain \ud… escape can come from nothing else.
	if (/(?<!\\)(?:\\\\)*\\ud[89a-f]/.test(text)) throw new NotCanonical('half of a surrogate pair');
	return text;
};

// ignoreBOM keeps a byte order mark in the text, where the comparison below refuses it.
const utf8 = new TextDecoder('utf-8', { fatal: true, ignoreBOM: true });

/**
 * The strict reader: accepts only bytes that are the canonical form of what they say, so that duplicate keys, numbers
 * beyond doubles, other spellings, blanks, byte order marks and broken UTF-8 are all refused.
 */
export const parseCanonical = (bytes: Uint8Array): unknown => {
	let text: string;
	let value: unknown;
	try {
		text = utf8.decode(bytes);
		value = JSON.parse(text);
	} catch (cause) {
		throw new NotCanonical(cause instanceof Error ? cause.message : 'not JSON', { cause });
	}
	if (canonical(value) !== text) throw new NotCanonical('the text is not its own canonical form');
	return value;
};
