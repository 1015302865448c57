import { timingSafeEqual, verify } from 'node:crypto';
import { strictBase64url } from './base64url';
import { canonical, parseCanonical } from './canonical';
import { readClientData } from './client-data';
import { publicKeyFromText, type PublicKey } from './cose-key';
import { digestForm, sha256 } from './digest';

/** What a person signs over: the act, its subject and everything decided upon, at a named head of the log. */
export interface Statement {
	readonly action: string;
	readonly at: string;
	readonly by: string;
	readonly decision: string;
	/** Sorted by name. */
	readonly digests: readonly { readonly name: string; readonly sha256: string }[];
	/** The head of the log when the page was built. */
	readonly log: { readonly root: string; readonly size: number };
	readonly nonce: string;
	/** Origin line of the log's checkpoints. */
	readonly register: string;
	readonly subject: string;
	readonly v: 1;
}

/** A statement and the assertion over it, as an entry keeps them; bytes in base64url. */
export interface SignedStatement {
	readonly statement: string;
	readonly authenticatorData: string;
	readonly clientDataJSON: string;
	readonly signature: string;
}

/** A signature that does not stand, and why. */
export class BadStepUp extends Error {
	override readonly name = 'BadStepUp';
}

const keys = ['action', 'at', 'by', 'decision', 'digests', 'log', 'nonce', 'register', 'subject', 'v'];
const texts = ['action', 'at', 'by', 'decision', 'nonce', 'register', 'subject'] as const;

const sameKeys = (value: object, wanted: readonly string[]): boolean =>
	Object.keys(value).sort().join() === [...wanted].sort().join();

const isDigest = (value: unknown): value is { name: string; sha256: string } =>
	typeof value === 'object' &&
	value !== null &&
	sameKeys(value, ['name', 'sha256']) &&
	'name' in value &&
	typeof value.name === 'string' &&
	'sha256' in value &&
	typeof value.sha256 === 'string' &&
	digestForm.test(value.sha256);

/** Reads a statement from its canonical text. @throws BadStepUp */
export const readStatement = (text: string): Statement => {
	let value: unknown;
	try {
		value = parseCanonical(Buffer.from(text, 'utf8'));
	} catch (cause) {
		throw new BadStepUp('the statement is not canonical JSON', { cause });
	}
	if (typeof value !== 'object' || value === null || !sameKeys(value, keys))
		throw new BadStepUp('the statement has other members than a statement has');
	const said = value as Record<string, unknown>;
	const { digests, log, v } = said;
	const head = log as { root?: unknown; size?: unknown } | null;
	if (!texts.every((name) => typeof said[name] === 'string') || v !== 1)
		throw new BadStepUp('a member of the statement is malformed');
	if (!Array.isArray(digests) || !digests.every(isDigest))
		throw new BadStepUp('the digests of the statement are malformed');
	if (digests.some(({ name }, i) => i > 0 && digests[i - 1]!.name >= name))
		throw new BadStepUp('the digests of the statement are not sorted by name');
	if (typeof head !== 'object' || typeof head?.root !== 'string' || !Number.isSafeInteger(head.size))
		throw new BadStepUp('the head in the statement is malformed');
	return value as Statement;
};

/** The canonical text that is kept and signed. */
export const statementText = (statement: Statement): string => canonical(statement);

/** The challenge a statement stands for: SHA-256 of its text. */
export const challengeOf = (statement: string): Buffer => sha256(Buffer.from(statement, 'utf8'));

/** Flags of authenticator data (WebAuthn Level 3, section 6.1). */
export const flag = { up: 0x01, uv: 0x04, be: 0x08, bs: 0x10, at: 0x40, ed: 0x80 } as const;

/** Strict DER of an ECDSA signature on P-256: two positive integers in their shortest form, nothing behind. */
export const strictDer = (der: Buffer): boolean => {
	const integer = (at: number): number | undefined => {
		const length = der[at + 1];
		if (der[at] !== 0x02 || length === undefined || length < 1 || length > 33) return undefined;
		const [first, second] = [der[at + 2], der[at + 3]];
		if (first === undefined || at + 2 + length > der.length || first >= 0x80) return undefined;
		if (first === 0 && (length === 1 || second! < 0x80)) return undefined;
		return at + 2 + length;
	};
	if (der[0] !== 0x30 || der[1] !== der.length - 2) return false;
	const middle = integer(2);
	return middle !== undefined && integer(middle) === der.length;
};

/** Whether the signature over the bytes is the key's. */
export const signedBy = ({ algorithm, key }: PublicKey, bytes: Buffer, signature: Buffer): boolean => {
	if (algorithm === -8) return verify(null, bytes, key, signature);
	if (algorithm === -7 && !strictDer(signature)) return false;
	return verify('sha256', bytes, key, signature);
};

const decoded = (name: string, text: string): Buffer => {
	const bytes = strictBase64url(text);
	if (!bytes) throw new BadStepUp(`${name} is not base64url`);
	return bytes;
};

const checkClientData = (bytes: Buffer, challenge: Buffer, origin: string): void => {
	let said: ReturnType<typeof readClientData>;
	try {
		said = readClientData(bytes);
	} catch (cause) {
		throw new BadStepUp(cause instanceof Error ? cause.message : 'unreadable', { cause });
	}
	if (said.type !== 'webauthn.get') throw new BadStepUp('the client data is of another ceremony');
	const received = strictBase64url(said.challenge);
	if (received?.length !== 32 || !timingSafeEqual(received, challenge))
		throw new BadStepUp('the challenge is not that of the statement');
	if (said.origin !== origin) throw new BadStepUp('the signature was made at another origin');
	if (said.crossOrigin === true || said.topOrigin !== undefined)
		throw new BadStepUp('the signature was made inside a page of another origin');
};

const checkAuthenticatorData = (bytes: Buffer, rpId: string): void => {
	if (bytes.length < 37) throw new BadStepUp('the authenticator data is cut');
	if (!timingSafeEqual(bytes.subarray(0, 32), sha256(Buffer.from(rpId, 'utf8'))))
		throw new BadStepUp('the credential belongs to another host');
	const flags = bytes[32]!;
	if ((flags & (flag.at | flag.ed)) === 0 && bytes.length !== 37)
		throw new BadStepUp('bytes follow the authenticator data');
	if (!(flags & flag.up) || !(flags & flag.uv))
		throw new BadStepUp('the person was not present or not verified');
	if (flags & flag.bs && !(flags & flag.be)) throw new BadStepUp('the backup flags contradict each other');
};

/**
 * Verifies a signature over a statement from bytes alone (WebAuthn Level 3, section 7.2): needs the enrolled public key
 * and the address the register answers at, no database and no network.
 * Whether the key was the signer's at that moment is the log's matter.
 * @param enrolled COSE_Key in base64url, as `credential.enrolled` holds it
 * @throws BadStepUp, BadKey
 */
export const verifyStepUp = (stepUp: SignedStatement, enrolled: string, origin: string): Statement => {
	const statement = readStatement(stepUp.statement);
	const clientData = decoded('clientDataJSON', stepUp.clientDataJSON);
	const authenticatorData = decoded('authenticatorData', stepUp.authenticatorData);
	checkClientData(clientData, challengeOf(stepUp.statement), origin);
	checkAuthenticatorData(authenticatorData, new URL(origin).hostname);
	const signed = Buffer.concat([authenticatorData, sha256(clientData)]);
	if (!signedBy(publicKeyFromText(enrolled), signed, decoded('signature', stepUp.signature)))
		throw new BadStepUp('the signature is not that of the enrolled key');
	return statement;
};
