import { createHash, randomBytes, timingSafeEqual } from 'node:crypto';
import { base32 } from '$lib/chain/base32';
import type { PersonId, Scope } from '$lib/domain/actor';
import type { Ctx } from '$lib/server/context';
import type { Tx } from '$lib/server/db/handle';
import type { Schema } from '$lib/server/db/schema';
import { tokenById } from './auth.queries';
import { randomText, secretHash } from './secret';

const form = /^kbt_([a-z2-7]{10})_([A-Za-z0-9_-]{43})_([a-z2-7]{6})$/;

/** Finds mistyped and cut tokens, and makes scanning for disclosed ones safe. */
const checksum = (body: string): string => base32(createHash('sha256').update(body).digest()).slice(0, 6);

/** A new public id; the secret is made when the token is entered. */
export const newTokenId = (): string => randomText(10).slice(0, 10);

/** Makes the secret of 256 bits, stores its digest, and returns the token as it is shown once. */
export const makeToken = (tx: Tx, id: string, label: string): string => {
	const secret = randomBytes(32).toString('base64url');
	tx.insert('token_secret', { id, hash: secretHash(secret), label, used_at: null });
	const body = `kbt_${id}_${secret}`;
	return `${body}_${checksum(body)}`;
};

/** The public id in a well-formed token. */
export const tokenIdIn = (token: string): string | undefined => {
	const parts = form.exec(token);
	return parts && checksum(token.slice(0, -7)) === parts[3] ? parts[1] : undefined;
};

/** The first well-formed token anywhere in a text: one that stands in an address or a body is disclosed. */
export const tokenWithin = (text: string): string | undefined =>
	text
		.match(/kbt_[a-z2-7]{10}_[A-Za-z0-9_-]{43}_[a-z2-7]{6}/g)
		?.find((token) => tokenIdIn(token) !== undefined);

export interface PresentedToken {
	readonly id: string;
	readonly person: PersonId;
	readonly scopes: readonly Scope[];
}

type Found = Schema['token'] & { hash: string; used_at: string | null };

/** Judges a token: form, digest, expiry, revocation; notes its use to the hour. */
export const presentedToken = (ctx: Ctx, token: string): PresentedToken | undefined => {
	const id = tokenIdIn(token);
	if (id === undefined) return undefined;
	const row = ctx.read.first<Found>(tokenById(ctx.read.q, id));
	const [, , secret] = form.exec(token)!;
	const now = ctx.now().toISOString();
	if (!row || row.revoked_at !== null || row.expires_at <= now) return undefined;
	if (!timingSafeEqual(Buffer.from(secretHash(secret!)), Buffer.from(row.hash))) return undefined;
	const hour = `${now.slice(0, 13)}:00:00.000Z`;
	if (row.used_at !== hour) ctx.write((tx) => tx.update('token_secret', { id }, { used_at: hour }));
	return Object.freeze({ id, person: row.person as PersonId, scopes: JSON.parse(row.scopes) as Scope[] });
};
