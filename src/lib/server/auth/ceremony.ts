import { timingSafeEqual } from 'node:crypto';
import { strictBase64url } from '$lib/chain/base64url';
import { readClientData, type ClientData } from '$lib/chain/client-data';
import { sha256 } from '$lib/chain/digest';
import { flag } from '$lib/chain/step-up';
import { AuthFault } from './fault';

/** Largest answer of an authenticator that is read, in bytes. */
export const largestAnswer = 16_384;

/** Parses the text a form posts. @throws AuthFault */
export const readAnswer = (text: string): unknown => {
	if (Buffer.byteLength(text) > largestAnswer) throw new AuthFault('request', 'The answer is over 16 KiB.');
	try {
		return JSON.parse(text);
	} catch (cause) {
		throw Object.assign(new AuthFault('request', 'The answer is not JSON.'), { cause });
	}
};

/** Base64url without padding that encodes back to itself. @throws AuthFault */
export const strictBytes = (name: string, text: string): Buffer => {
	const bytes = strictBase64url(text);
	if (!bytes) throw new AuthFault('request', `${name} is not base64url without padding.`);
	return bytes;
};

/** The client data, strictly read. @throws AuthFault */
export const clientDataOf = (bytes: Buffer): ClientData => {
	try {
		return readClientData(bytes);
	} catch (cause) {
		throw new AuthFault('client data', cause instanceof Error ? cause.message : 'unreadable');
	}
};

/** The challenge in client data: 32 bytes. @throws AuthFault */
export const challengeIn = (said: ClientData): Buffer => {
	const challenge = strictBase64url(said.challenge);
	if (challenge?.length !== 32)
		throw new AuthFault('challenge', 'The challenge is not 32 bytes in base64url.');
	return challenge;
};

/** Ceremony, origin and framing. A token binding is ignored. @throws AuthFault */
export const checkClientData = (said: ClientData, type: string, origins: readonly string[]): void => {
	if (said.type !== type) throw new AuthFault('client data', `The ceremony is ${said.type}, not ${type}.`);
	if (!origins.includes(said.origin)) throw new AuthFault('client data', 'The origin is not this register.');
	if (said.crossOrigin === true) throw new AuthFault('client data', 'The page stood inside another origin.');
	if (said.topOrigin !== undefined)
		throw new AuthFault('client data', 'The page stood under another origin.');
};

/** What authenticator data say before any credential in them. */
export interface AuthenticatorFlags {
	readonly backupEligible: boolean;
	readonly backedUp: boolean;
	readonly counter: number;
}

/** Host, presence, verification and backup flags; reserved bits are ignored. @throws AuthFault */
export const checkAuthenticatorData = (bytes: Buffer, rpId: string): AuthenticatorFlags => {
	const wrong = (words: string): AuthFault => new AuthFault('authenticator data', words);
	if (bytes.length < 37) throw wrong('The authenticator data are cut.');
	if (!timingSafeEqual(bytes.subarray(0, 32), sha256(Buffer.from(rpId, 'utf8'))))
		throw wrong('The credential belongs to another host.');
	const flags = bytes[32]!;
	if (!(flags & flag.up)) throw wrong('The person was not present.');
	if (!(flags & flag.uv)) throw wrong('The person was not verified by the authenticator.');
	const backupEligible = (flags & flag.be) !== 0;
	const backedUp = (flags & flag.bs) !== 0;
	if (backedUp && !backupEligible)
		throw new AuthFault('backup flag', 'Backed up, but not eligible for backup.');
	return { backupEligible, backedUp, counter: bytes.readUInt32BE(33) };
};
