import { BadKey, publicKeyFrom, rawPublicKey, sign, verifySignature } from '$lib/chain/ed25519';
import { createPrivateKey, createPublicKey, generateKeyPairSync, verify } from 'node:crypto';
import { describe, expect, test } from 'vitest';
import vectors from '../vectors/ed25519.json';

const bytes = (hex: string): Buffer => Buffer.from(hex, 'hex');

const check = ({
	publicKey,
	message,
	signature
}: {
	publicKey: string;
	message: string;
	signature: string;
}): boolean => {
	try {
		return verifySignature(bytes(publicKey), bytes(message), bytes(signature));
	} catch (cause) {
		if (cause instanceof BadKey) return false;
		throw cause;
	}
};

describe('Ed25519 (RFC 8032)', () => {
	test.each(vectors.mustPass)('$publicKey signs and verifies', (vector) => {
		const key = createPrivateKey({
			key: bytes(`302e020100300506032b657004220420${vector.secret}`),
			format: 'der',
			type: 'pkcs8'
		});
		expect(rawPublicKey(key).toString('hex')).toBe(vector.publicKey);
		expect(sign(key, bytes(vector.message)).toString('hex')).toBe(vector.signature);
		expect(check(vector)).toBe(true);
	});

	test.each(vectors.mustFail)('refuses: $name', (vector) => expect(check(vector)).toBe(false));

	test('a key of another kind is refused', () => {
		expect(() => rawPublicKey(generateKeyPairSync('x25519').publicKey)).toThrow(BadKey);
		expect(() => publicKeyFrom(Buffer.alloc(31, 1))).toThrow(BadKey);
	});
});

describe('trap-07: keys of small order', () => {
	const one = bytes('01'.padEnd(64, '0'));
	// R = the neutral point, S = 0: holds for every message under such a key.
	const signature = bytes('01'.padEnd(128, '0'));

	test('Node itself takes one signature for every message', () => {
		const key = createPublicKey({
			key: Buffer.concat([bytes('302a300506032b6570032100'), one]),
			format: 'der',
			type: 'spki'
		});
		expect(verify(null, Buffer.from('anything'), key, signature)).toBe(true);
	});

	test.each([
		'0000000000000000000000000000000000000000000000000000000000000000',
		'0000000000000000000000000000000000000000000000000000000000000080',
		'0100000000000000000000000000000000000000000000000000000000000000',
		'0100000000000000000000000000000000000000000000000000000000000080',
		'ecffffffffffffffffffffffffffffffffffffffffffffffffffffffffffff7f',
		'26e8958fc2b227b045c3f489f2ef98f0d5dfac05d3c63339b13802886d53fc05',
		'26e8958fc2b227b045c3f489f2ef98f0d5dfac05d3c63339b13802886d53fc85',
		'c7176a703d4dd84fba3c0b760d10670f2a2053fa2c39ccc64ec7fd7792ac037a',
		'c7176a703d4dd84fba3c0b760d10670f2a2053fa2c39ccc64ec7fd7792ac03fa',
		'edffffffffffffffffffffffffffffffffffffffffffffffffffffffffffff7f',
		'eeffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffff'
	])('ours refuses %s', (hex) => {
		expect(() => publicKeyFrom(bytes(hex))).toThrow('small order');
	});
});
