import type { KeyObject } from 'node:crypto';
import { sign, verifySignature } from './ed25519';
import { isKeyName, strictBase64, type Verifier } from './verifier-key';

/** A text that is not a well-formed signed note, or whose known signature fails. */
export class BadNote extends Error {
	override readonly name = 'BadNote';
}

export interface Signature {
	readonly name: string;
	readonly id: Buffer;
	readonly signature: Buffer;
}

export interface Note {
	/** What is signed: ends in a newline, without the blank line. */
	readonly text: string;
	readonly signatures: readonly Signature[];
}

const mostBytes = 16_384;
const mostSignatures = 16;
const dash = '\u2014';

/** Signs a text that ends in a newline (C2SP signed-note, Ed25519). */
export const signNote = (text: string, verifier: Verifier, key: KeyObject): string => {
	const bytes = Buffer.concat([verifier.id, sign(key, Buffer.from(text))]);
	return `${text}\n${dash} ${verifier.name} ${bytes.toString('base64')}\n`;
};

const parseSignature = (line: string): Signature => {
	const parts = line.split(' ');
	const [mark, name, encoded] = parts;
	if (parts.length !== 3 || mark !== dash || !name || !encoded)
		throw new BadNote('a signature line is malformed');
	if (!isKeyName(name)) throw new BadNote('a key name is malformed');
	const bytes = strictBase64(encoded);
	if (!bytes || bytes.length < 5) throw new BadNote('a signature is not standard base64');
	return { name, id: bytes.subarray(0, 4), signature: bytes.subarray(4) };
};

/** Takes a note apart without judging its signatures. @throws BadNote */
export const parseNote = (note: string): Note => {
	if (Buffer.byteLength(note) > mostBytes) throw new BadNote('the note is too long');
	if (!note.isWellFormed()) throw new BadNote('the note is not well-formed text');
	// eslint-disable-next-line no-control-regex -- control characters are what is looked for
	if (/[\u0000-\u0009\u000b-\u001f\u007f-\u009f]/.test(note))
		throw new BadNote('the note holds a control character');
	const split = note.lastIndexOf('\n\n');
	if (split <= 0 || !note.endsWith('\n')) throw new BadNote('no blank line before the signatures');
	const lines = note.slice(split + 2, -1).split('\n');
	if (lines.length > mostSignatures) throw new BadNote('too many signatures');
	return { text: note.slice(0, split + 1), signatures: lines.map(parseSignature) };
};

/**
 * Opens a note: unknown keys are ignored, a known key that fails rejects it all.
 * @returns the note and the verifiers that signed it. @throws BadNote also when no known key signed it.
 */
export const openNote = (
	note: string,
	known: readonly Verifier[]
): Note & { readonly by: readonly Verifier[] } => {
	const parsed = parseNote(note);
	const by: Verifier[] = [];
	for (const { name, id, signature } of parsed.signatures) {
		const verifier = known.find((one) => one.name === name && one.id.equals(id));
		if (!verifier) continue;
		if (by.includes(verifier)) throw new BadNote(`${name} signed twice`);
		if (!verifySignature(verifier.publicKey, Buffer.from(parsed.text), signature))
			throw new BadNote(`the signature of ${name} fails`);
		by.push(verifier);
	}
	if (by.length === 0) throw new BadNote('no known key signed the note');
	return { ...parsed, by };
};
