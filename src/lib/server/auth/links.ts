import { randomBytes } from 'node:crypto';
import type { PersonId } from '$lib/domain/actor';
import type { Ctx } from '$lib/server/context';
import type { Tx } from '$lib/server/db/handle';
import type { Schema } from '$lib/server/db/schema';
import { linkByHash, useLink } from './auth.queries';
import { AuthFault } from './fault';
import { secretHash } from './secret';

type Link = Schema['enrolment_link'];

/** How long each kind lives, in minutes. */
const lifetime: Readonly<Record<Link['kind'], number>> = {
	invitation: 3 * 24 * 60,
	first: 24 * 60,
	recovery: 30
};

/** Makes a one-time link of 256 bits; earlier ones of the person die, and only the digest is stored. */
export const makeLink = (ctx: Ctx, tx: Tx, person: PersonId, kind: Link['kind']): string => {
	const secret = randomBytes(32).toString('base64url');
	const expires = new Date(ctx.now().getTime() + lifetime[kind] * 60_000).toISOString();
	tx.remove('enrolment_link', { person });
	tx.insert('enrolment_link', { hash: secretHash(secret), person, kind, expires_at: expires, used_at: null });
	return secret;
};

/** The secret stands in the fragment, which browsers send to nobody. */
export const linkUrl = (ctx: Ctx, secret: string): string => `${ctx.config.origin}/enrol#${secret}`;

/** The link of a secret that can still be used. @throws AuthFault */
export const openLink = (ctx: Ctx, secret: string): Link => {
	const link = ctx.read.first<Link>(linkByHash(ctx.read.q, secretHash(secret)));
	if (!link || link.used_at !== null || link.expires_at <= ctx.now().toISOString())
		throw new AuthFault('request', 'The link is unknown, was used or is over.');
	return link;
};

/** Takes a link once. @throws AuthFault when it was taken meanwhile */
export const takeLink = (ctx: Ctx, tx: Tx, secret: string): void => {
	if (tx.run(useLink(tx.q, secretHash(secret), ctx.now().toISOString())) !== 1)
		throw new AuthFault('request', 'The link was used.');
};
