import { reject } from './rejected';

export type Encoding = 'UTF-8' | 'UTF-16LE' | 'UTF-16BE';

const line = (bytes: Uint8Array, end: number): number => {
	let lines = 1;
	for (let i = 0; i < end; i++) if (bytes[i] === 0x0a) lines++;
	return lines;
};

/** First byte that no valid UTF-8 text could hold at its place, or -1. */
const firstBadByte = (bytes: Uint8Array): number => {
	let low = 0;
	let high = bytes.length;
	const valid = (end: number): boolean => {
		try {
			new TextDecoder('utf-8', { fatal: true, ignoreBOM: true }).decode(bytes.subarray(0, end), {
				stream: true
			});
			return true;
		} catch {
			return false;
		}
	};
	if (valid(high)) return high - 1;
	while (high - low > 1) {
		const middle = (low + high) >> 1;
		if (valid(middle)) low = middle;
		else high = middle;
	}
	return low;
};

const decodes = (bytes: Uint8Array, encoding: string): boolean => {
	try {
		new TextDecoder(encoding, { fatal: true }).decode(bytes);
		return true;
	} catch {
		return false;
	}
};

const share = (bytes: Uint8Array, test: (byte: number) => boolean): number => {
	const sample = bytes.subarray(0, 4096);
	return sample.reduce((n, byte) => n + (test(byte) ? 1 : 0), 0) / Math.max(1, sample.length);
};

/** A guess at an encoding that is not taken, for the message only. */
const guess = (bytes: Uint8Array): string => {
	// Digits of EBCDIC lie at F0..F9, its space at 40, its line end at 15 or 25: hardly any byte is ASCII text.
	if (
		share(bytes, (b) => (b >= 0xf0 && b <= 0xf9) || b === 0x40 || b === 0x6b || b === 0x15 || b === 0x25) >
		0.5
	)
		return 'EBCDIC';
	const pairs = share(bytes, (b) => (b >= 0x81 && b <= 0x9f) || (b >= 0xe0 && b <= 0xfc));
	if (pairs > 0.05 && decodes(bytes, 'shift_jis')) return 'Shift-JIS';
	return 'Windows-1252 or Latin-1';
};

const utf16 = (bytes: Uint8Array, encoding: 'UTF-16LE' | 'UTF-16BE'): string => {
	const body = bytes.subarray(2);
	if (body.length % 2 === 1)
		reject('encoding', [1, `${encoding} cut in the middle of a character`], { row: 1 });
	try {
		return new TextDecoder(encoding.toLowerCase(), { fatal: true, ignoreBOM: true }).decode(body);
	} catch {
		return reject('encoding', [1, `broken ${encoding}`], { row: 1 });
	}
};

const rowOf = (text: string, end: number): number => {
	let rows = 1;
	for (let at = text.indexOf('\n'); at !== -1 && at < end; at = text.indexOf('\n', at + 1)) rows++;
	return rows;
};

/** C0 controls other than tab and line ends, and DEL. */
// eslint-disable-next-line no-control-regex -- finding them is the point
const control = /[\u0000-\u0008\u000b\u000c\u000e-\u001f\u007f]/;

const starts = (bytes: Uint8Array, ...prefix: number[]): boolean =>
	prefix.every((byte, i) => bytes[i] === byte);

const decodeUtf8 = (bytes: Uint8Array): string => {
	const body = starts(bytes, 0xef, 0xbb, 0xbf) ? bytes.subarray(3) : bytes;
	try {
		return new TextDecoder('utf-8', { fatal: true, ignoreBOM: true }).decode(body);
	} catch {
		const row = line(body, firstBadByte(body));
		return reject('encoding', [row, guess(body)], { row });
	}
};

/**
 * Text of a file: UTF-8 with or without byte order mark, UTF-16 with one.
 * @throws Rejected `encoding` for anything else, `control` for control characters.
 */
export const decodeText = (bytes: Uint8Array): { text: string; encoding: Encoding } => {
	if (starts(bytes, 0xff, 0xfe, 0, 0) || starts(bytes, 0, 0, 0xfe, 0xff))
		reject('encoding', [1, 'UTF-32'], { row: 1 });
	const encoding: Encoding = starts(bytes, 0xff, 0xfe)
		? 'UTF-16LE'
		: starts(bytes, 0xfe, 0xff)
			? 'UTF-16BE'
			: 'UTF-8';
	// Every second byte zero is UTF-16 that lost its mark: a better word than "control character".
	if (encoding === 'UTF-8' && bytes.length > 3 && share(bytes, (byte) => byte === 0) > 0.3)
		reject('encoding', [1, 'UTF-16 without a byte order mark, or UTF-32'], { row: 1 });
	const text = encoding === 'UTF-8' ? decodeUtf8(bytes) : utf16(bytes, encoding);
	const bom = text.indexOf('\ufeff');
	if (bom !== -1) {
		const row = rowOf(text, bom);
		reject('encoding', [row, 'files joined together, with a byte order mark inside'], { row });
	}
	const found = control.exec(text);
	if (found) {
		const row = rowOf(text, found.index);
		reject('control', [row, found[0].charCodeAt(0)], { row });
	}
	return { text, encoding };
};
