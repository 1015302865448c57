import { hash } from 'node:crypto';

/** SHA-256 (FIPS 180-4) of the concatenated parts. */
export const sha256 = (...parts: readonly Uint8Array[]): Buffer =>
	hash('sha256', parts.length === 1 ? parts[0]! : Buffer.concat(parts), 'buffer');

/** The digest of bytes as entries write it: `sha256:` and 64 hexadecimal digits. */
export const digestOf = (bytes: Uint8Array): string => `sha256:${sha256(bytes).toString('hex')}`;

export const digestForm = /^sha256:[0-9a-f]{64}$/;
