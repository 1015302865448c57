import { createPublicKey, sign as signBytes, verify as verifyBytes, type KeyObject } from 'node:crypto';

/** A key that must not be used: not 32 bytes, or of small order. */
export class BadKey extends Error {
	override readonly name = 'BadKey';
}

/**
 * Points of small order and their other encodings (y = 0, ±1, the two of order 8, and y + p of 0 and 1), without the sign
 * bit. With such a key one signature passes for every message, and Node does not refuse it.
 */
const smallOrderPoints = new Set([
	'0000000000000000000000000000000000000000000000000000000000000000',
	'0100000000000000000000000000000000000000000000000000000000000000',
	'26e8958fc2b227b045c3f489f2ef98f0d5dfac05d3c63339b13802886d53fc05',
	'c7176a703d4dd84fba3c0b760d10670f2a2053fa2c39ccc64ec7fd7792ac037a',
	'ecffffffffffffffffffffffffffffffffffffffffffffffffffffffffffff7f',
	'edffffffffffffffffffffffffffffffffffffffffffffffffffffffffffff7f',
	'eeffffffffffffffffffffffffffffffffffffffffffffffffffffffffffff7f'
]);

const spkiPrefix = Buffer.from('302a300506032b6570032100', 'hex');

/** Whether 32 raw bytes encode a point of small order. */
export const smallOrder = (raw: Uint8Array): boolean => {
	const y = Buffer.from(raw);
	y[31] = y[31]! & 0x7f;
	return smallOrderPoints.has(y.toString('hex'));
};

/** Checks 32 raw bytes of an Ed25519 public key. @throws BadKey */
export const checkPublicKey = (raw: Uint8Array): void => {
	if (raw.length !== 32) throw new BadKey(`an Ed25519 key has 32 bytes, not ${raw.length}`);
	if (smallOrder(raw)) throw new BadKey('the Ed25519 key is of small order');
};

/** A public key from its 32 raw bytes (RFC 8032 §5.1.5). @throws BadKey */
export const publicKeyFrom = (raw: Uint8Array): KeyObject => {
	checkPublicKey(raw);
	return createPublicKey({ key: Buffer.concat([spkiPrefix, raw]), format: 'der', type: 'spki' });
};

/** The 32 raw bytes of the public half of a key. @throws BadKey */
export const rawPublicKey = (key: KeyObject): Buffer => {
	const half = key.type === 'private' ? createPublicKey(key) : key;
	if (half.asymmetricKeyType !== 'ed25519') throw new BadKey('the key is not an Ed25519 key');
	const raw = half.export({ format: 'der', type: 'spki' }).subarray(spkiPrefix.length);
	checkPublicKey(raw);
	return raw;
};

/** Ed25519 signature (RFC 8032 §5.1.6), 64 bytes. */
export const sign = (key: KeyObject, message: Uint8Array): Buffer => signBytes(null, message, key);

/** Verifies an Ed25519 signature; false for any fault of the signature. @throws BadKey */
export const verifySignature = (raw: Uint8Array, message: Uint8Array, signature: Uint8Array): boolean =>
	verifyBytes(null, message, publicKeyFrom(raw), signature);
