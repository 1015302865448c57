const alphabet = 'abcdefghijklmnopqrstuvwxyz234567';

/** Base32 of RFC 4648 in lower case, without padding: what people can read aloud. */
export const base32 = (bytes: Uint8Array): string => {
	let text = '';
	let bits = 0;
	let value = 0;
	for (const byte of bytes) {
		value = (value << 8) | byte;
		bits += 8;
		while (bits >= 5) {
			bits -= 5;
			text += alphabet[(value >>> bits) & 31];
		}
		value &= (1 << bits) - 1;
	}
	return bits === 0 ? text : text + alphabet[(value << (5 - bits)) & 31];
};
