import { createPrivateKey, generateKeyPairSync, type KeyObject } from 'node:crypto';
import {
	closeSync,
	constants,
	fstatSync,
	fsyncSync,
	linkSync,
	openSync,
	readFileSync,
	rmSync,
	writeSync
} from 'node:fs';
import { dirname } from 'node:path';
import { rawPublicKey } from '$lib/chain/ed25519';
import { StartFault } from '../start-fault';

/** The log's signing key is missing, readable by others, or not what it must be. */
const refused = (sentence: string): StartFault => new StartFault(78, sentence);

export interface LogKey {
	readonly key: KeyObject;
	/** The 32 raw bytes of the public half. */
	readonly publicKey: Buffer;
}

const keyOf = (pem: string): LogKey => {
	try {
		const key = createPrivateKey(pem);
		return Object.freeze({ key, publicKey: rawPublicKey(key) });
	} catch {
		throw refused('The log key is not an Ed25519 private key in PKCS#8 PEM');
	}
};

/** Reads the key file; it must belong to this user and be closed to everybody else. @throws StartFault 78 */
export const readKey = (file: string): LogKey => {
	let descriptor: number;
	try {
		descriptor = openSync(file, constants.O_RDONLY | constants.O_NOFOLLOW);
	} catch {
		throw refused(`The log key ${file} cannot be read`);
	}
	try {
		// Judged on the open file, so that nothing can be exchanged between the look and the reading.
		const { mode, uid } = fstatSync(descriptor);
		if ((mode & 0o177) !== 0) throw refused(`The log key ${file} must have the rights 0600 or 0400`);
		if (process.getuid && uid !== process.getuid())
			throw refused(`The log key ${file} belongs to another user`);
		return keyOf(readFileSync(descriptor, 'utf8'));
	} finally {
		closeSync(descriptor);
	}
};

const flushed = (
	path: string,
	flags: string | number,
	work: (descriptor: number) => void,
	mode?: number
): void => {
	const descriptor = openSync(path, flags, mode);
	try {
		work(descriptor);
		fsyncSync(descriptor);
	} finally {
		closeSync(descriptor);
	}
};

/**
 * Makes a key for an empty register; never over a file that exists. The file appears whole or not at all, and is durable
 * before the first entry names it. @throws StartFault 78
 */
export const makeKey = (file: string): LogKey => {
	const pem = generateKeyPairSync('ed25519').privateKey.export({ format: 'pem', type: 'pkcs8' }) as string;
	const partial = `${file}.partial`;
	try {
		rmSync(partial, { force: true });
		flushed(partial, 'wx', (descriptor) => void writeSync(descriptor, pem), 0o600);
		linkSync(partial, file);
		rmSync(partial);
		flushed(dirname(file), 'r', () => undefined);
	} catch {
		throw refused(`The log key ${file} cannot be written`);
	}
	return readKey(file);
};
