import { createHash, randomBytes } from 'node:crypto';
import { base32 } from '$lib/chain/base32';
import type { PersonId } from '$lib/domain/actor';

/** Random bits as base32 text. */
export const randomText = (bytes: number): string => base32(randomBytes(bytes));

/** SHA-256 in hex: all that is ever stored of a token, a link or a challenge. */
export const secretHash = (secret: string | Uint8Array): string =>
	createHash('sha256').update(secret).digest('hex');

/** 128 random bits: an id that says nothing about the person. */
export const newPersonId = (): PersonId => `p_${randomText(16)}`;

/** Public name of a session, which the log may show. */
export const newSessionLabel = (): string => `s_${randomText(10)}`;
