import { randomBytes } from 'node:crypto';
import type { PersonId } from '$lib/domain/actor';
import type { Ctx } from '$lib/server/context';
import type { Schema } from '$lib/server/db/schema';
import { challengeByHash, staleChallenges } from './auth.queries';
import { AuthFault } from './fault';
import { secretHash } from './secret';

type Row = Schema['challenge'];
export type ChallengeKind = Row['kind'];

const minutes = 5;

export interface Asked {
	readonly kind: ChallengeKind;
	/** Session hash, or the hash of the visitor's door cookie. */
	readonly holder: string;
	readonly person?: PersonId;
	/** A step-up's challenge is the digest of its statement; otherwise 32 random bytes. */
	readonly signs?: { readonly challenge: Buffer; readonly statement: string; readonly payload: string };
}

/** Issues a challenge of five minutes; only its digest is stored. */
export const issueChallenge = (ctx: Ctx, { kind, holder, person, signs }: Asked): Buffer => {
	const challenge = signs?.challenge ?? randomBytes(32);
	const now = ctx.now();
	ctx.write((tx) => {
		tx.run(staleChallenges(tx.q, now.toISOString()));
		tx.insert('challenge', {
			hash: secretHash(challenge),
			kind,
			holder,
			person: person ?? null,
			statement: signs?.statement ?? null,
			payload: signs?.payload ?? null,
			expires_at: new Date(now.getTime() + minutes * 60_000).toISOString()
		});
	});
	return challenge;
};

/**
 * Takes the challenge out of the table before anything is verified: one use, also when what follows fails.
 * @throws AuthFault when it is unknown, used, over, of another kind or another holder's
 */
export const takeChallenge = (ctx: Ctx, challenge: Uint8Array, kind: ChallengeKind, holder: string): Row => {
	const hash = secretHash(challenge);
	const row = ctx.write((tx) => {
		const found = tx.first(challengeByHash(tx.q, hash));
		if (!found || found.kind !== kind || found.holder !== holder) return undefined;
		return tx.remove('challenge', { hash }) === 1 ? found : undefined;
	});
	if (!row) throw new AuthFault('challenge', 'The challenge is unknown or was used.');
	if (row.expires_at <= ctx.now().toISOString()) throw new AuthFault('challenge', 'The challenge is over.');
	return row;
};

/** Drops what a holder has pending: after an answer too broken to say which challenge it meant. */
export const dropChallenges = (ctx: Ctx, kind: ChallengeKind, holder: string): void => {
	ctx.write((tx) => void tx.remove('challenge', { kind, holder }));
};
