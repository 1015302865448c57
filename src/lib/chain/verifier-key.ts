import { checkPublicKey } from './ed25519';
import { sha256 } from './digest';

/** Who signs notes, as a verifier must know it (C2SP signed-note). */
export interface Verifier {
	readonly name: string;
	/** First four bytes of SHA-256(name ‖ 0x0A ‖ 0x01 ‖ key). */
	readonly id: Buffer;
	readonly publicKey: Buffer;
}

const algorithm = Buffer.of(1);

/** A key name holds no blank and no plus sign (C2SP signed-note). */
export const isKeyName = (name: string): boolean =>
	name.length > 0 && name.length <= 255 && !/[\s+\p{C}]/u.test(name);

/** @throws Error for a bad name, BadKey for a bad key. */
export const verifierOf = (name: string, publicKey: Uint8Array): Verifier => {
	if (!isKeyName(name)) throw new Error('A key name holds no blank, no plus sign and no control character');
	checkPublicKey(publicKey);
	const id = sha256(Buffer.from(`${name}\n`), algorithm, publicKey).subarray(0, 4);
	return Object.freeze({ name, id, publicKey: Buffer.from(publicKey) });
};

/** The text form: `<name>+<hex key id>+<base64(0x01 ‖ key)>`. */
export const verifierText = ({ name, id, publicKey }: Verifier): string =>
	`${name}+${id.toString('hex')}+${Buffer.concat([algorithm, publicKey]).toString('base64')}`;

/** Standard base64 that re-encodes to itself, or undefined. */
export const strictBase64 = (text: string): Buffer | undefined => {
	const bytes = Buffer.from(text, 'base64');
	return bytes.toString('base64') === text ? bytes : undefined;
};

/** A text that is not a verifier key. */
export class BadVerifierKey extends Error {
	override readonly name = 'BadVerifierKey';
}

/** Reads the text form. @throws BadVerifierKey when it is malformed or its key id does not belong to it; BadKey. */
export const parseVerifier = (text: string): Verifier => {
	const [, name, id, key] = /^([^+]+)\+([0-9a-f]{8})\+([A-Za-z0-9+/=]+)$/.exec(text) ?? [];
	const bytes = key === undefined ? undefined : strictBase64(key);
	if (!name || !isKeyName(name) || !bytes || bytes[0] !== 1)
		throw new BadVerifierKey('Not a verifier key: <name>+<8 hex digits>+<base64>');
	const verifier = verifierOf(name, bytes.subarray(1));
	if (verifier.id.toString('hex') !== id)
		throw new BadVerifierKey('The key id does not belong to this name and key');
	return verifier;
};
