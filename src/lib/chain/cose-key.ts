import { createPublicKey, type KeyObject } from 'node:crypto';
import { strictBase64url } from './base64url';
import { BadKey, publicKeyFrom as ed25519Key } from './ed25519';

/** COSE algorithm numbers taken: EdDSA, ES256, RS256 (IANA COSE Algorithms). */
export const algorithms = [-8, -7, -257] as const;
export type Algorithm = (typeof algorithms)[number];

export interface PublicKey {
	readonly algorithm: Algorithm;
	readonly key: KeyObject;
}

type Value = number | Buffer;

/** Reads a CBOR map (RFC 8949) of integers to integers and byte strings: all that a COSE_Key of these kinds holds. */
class MapReader {
	#at = 0;
	constructor(private readonly bytes: Buffer) {}

	#head(): { readonly major: number; readonly argument: number } {
		const first = this.#take(1)[0]!;
		const low = first & 31;
		if (low < 24) return { major: first >> 5, argument: low };
		if (low > 25) throw new BadKey('the key holds a length beyond what keys have');
		const argument = this.#take(low === 24 ? 1 : 2).readUIntBE(0, low === 24 ? 1 : 2);
		if (argument < (low === 24 ? 24 : 256)) throw new BadKey('the key is not in its shortest form');
		return { major: first >> 5, argument };
	}

	#take(length: number): Buffer {
		if (this.#at + length > this.bytes.length) throw new BadKey('the key is cut');
		return this.bytes.subarray(this.#at, (this.#at += length));
	}

	#value(): Value {
		const { major, argument } = this.#head();
		if (major === 0) return argument;
		if (major === 1) return -1 - argument;
		if (major === 2) return Buffer.from(this.#take(argument));
		throw new BadKey('the key holds a value of another type');
	}

	read(): ReadonlyMap<number, Value> {
		const { major, argument } = this.#head();
		if (major !== 5) throw new BadKey('the key is not a map');
		const map = new Map<number, Value>();
		for (let i = 0; i < argument; i++) {
			const label = this.#value();
			if (typeof label !== 'number' || map.has(label))
				throw new BadKey('a label stands twice or is no integer');
			map.set(label, this.#value());
		}
		if (this.#at !== this.bytes.length) throw new BadKey('bytes follow the key');
		return map;
	}
}

const exactly = (map: ReadonlyMap<number, Value>, labels: readonly number[]): void => {
	if (map.size !== labels.length || !labels.every((label) => map.has(label)))
		throw new BadKey('the key holds other parameters than its type has');
};

const bytesOf = (map: ReadonlyMap<number, Value>, label: number, length?: number): Buffer => {
	const value = map.get(label);
	if (!Buffer.isBuffer(value) || (length !== undefined && value.length !== length))
		throw new BadKey(`parameter ${label} of the key is malformed`);
	return value;
};

const imported = (jwk: Record<string, string>): KeyObject => {
	try {
		// OpenSSL refuses a point that does not lie on the curve.
		return createPublicKey({ key: jwk, format: 'jwk' });
	} catch (cause) {
		throw new BadKey('the key is not on its curve or not a key', { cause });
	}
};

const text = (bytes: Buffer): string => bytes.toString('base64url');

/**
 * The key in a COSE_Key (RFC 9052, RFC 9053, RFC 8230): exactly the parameters of its type; P-256 point on the curve,
 * Ed25519 not of small order, RSA of at least 2,048 bits with exponent 65537.
 * @throws BadKey
 */
export const publicKeyOf = (cose: Uint8Array): PublicKey => {
	const map = new MapReader(Buffer.from(cose)).read();
	switch (map.get(3)) {
		case -8: {
			exactly(map, [1, 3, -1, -2]);
			const x = bytesOf(map, -2, 32);
			if (map.get(1) !== 1 || map.get(-1) !== 6) throw new BadKey('not an Ed25519 key');
			return { algorithm: -8, key: ed25519Key(x) };
		}
		case -7: {
			exactly(map, [1, 3, -1, -2, -3]);
			if (map.get(1) !== 2 || map.get(-1) !== 1) throw new BadKey('not a P-256 key');
			const [x, y] = [bytesOf(map, -2, 32), bytesOf(map, -3, 32)];
			return { algorithm: -7, key: imported({ kty: 'EC', crv: 'P-256', x: text(x), y: text(y) }) };
		}
		case -257: {
			exactly(map, [1, 3, -1, -2]);
			const [n, e] = [bytesOf(map, -1), bytesOf(map, -2)];
			if (map.get(1) !== 3 || n.length < 256 || n[0]! < 0x80 || e.toString('hex') !== '010001')
				throw new BadKey('an RSA key needs at least 2,048 bits and the exponent 65537');
			return { algorithm: -257, key: imported({ kty: 'RSA', n: text(n), e: text(e) }) };
		}
		default:
			throw new BadKey('the algorithm of the key is not taken');
	}
};

/** The same from base64url, as `credential.enrolled` writes it. @throws BadKey */
export const publicKeyFromText = (encoded: string): PublicKey => {
	const bytes = strictBase64url(encoded);
	if (!bytes) throw new BadKey('the key is not base64url');
	return publicKeyOf(bytes);
};
