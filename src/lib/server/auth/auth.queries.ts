import type { Kysely } from 'kysely';
import type { PersonId } from '$lib/domain/actor';
import type { Schema } from '$lib/server/db/schema';

type Q = Kysely<Schema>;

export const credentialById = (q: Q, id: string) =>
	q.selectFrom('credential').selectAll().where('id', '=', id);

export const credentialByKey = (q: Q, publicKey: string) =>
	q.selectFrom('credential').select('id').where('public_key', '=', publicKey);

/** Credentials a person can still use, oldest first. */
export const liveCredentials = (q: Q, person: PersonId) =>
	q
		.selectFrom('credential')
		.selectAll()
		.where('person', '=', person)
		.where('revoked_at', 'is', null)
		.orderBy('enrolled_at')
		.orderBy('id');

export const credentialUse = (q: Q, id: string) =>
	q.selectFrom('credential_use').selectAll().where('id', '=', id);

export const sessionByHash = (q: Q, hash: string) =>
	q.selectFrom('session').selectAll().where('hash', '=', hash);

/** A person's sessions, oldest first. */
export const sessionsOf = (q: Q, person: PersonId) =>
	q.selectFrom('session').selectAll().where('person', '=', person).orderBy('created_at').orderBy('hash');

export const everySession = (q: Q) => q.selectFrom('session').selectAll();

export const challengeByHash = (q: Q, hash: string) =>
	q.selectFrom('challenge').selectAll().where('hash', '=', hash);

export const staleChallenges = (q: Q, at: string) => q.deleteFrom('challenge').where('expires_at', '<=', at);

export const linkByHash = (q: Q, hash: string) =>
	q.selectFrom('enrolment_link').selectAll().where('hash', '=', hash);

/** Takes a link once: changes one row, or none when it was used or is over. */
export const useLink = (q: Q, hash: string, at: string) =>
	q
		.updateTable('enrolment_link')
		.set({ used_at: at })
		.where('hash', '=', hash)
		.where('used_at', 'is', null)
		.where('expires_at', '>', at);

export const passwordOf = (q: Q, person: PersonId) =>
	q.selectFrom('password').selectAll().where('person', '=', person);

export const unusedCodes = (q: Q, person: PersonId) =>
	q.selectFrom('recovery_code').selectAll().where('person', '=', person).where('used_at', 'is', null);

/** Takes a recovery code once. */
export const useCode = (q: Q, hash: string, at: string) =>
	q.updateTable('recovery_code').set({ used_at: at }).where('hash', '=', hash).where('used_at', 'is', null);

export const seatKeyOf = (q: Q, person: PersonId) =>
	q.selectFrom('seat_key').selectAll().where('person', '=', person);

export const tokenById = (q: Q, id: string) =>
	q
		.selectFrom('token')
		.innerJoin('token_secret', 'token_secret.id', 'token.id')
		.selectAll('token')
		.select(['token_secret.hash as hash', 'token_secret.used_at as used_at'])
		.where('token.id', '=', id);

/** A person's API tokens, newest first, with the label they gave. */
export const tokensOf = (q: Q, person: PersonId) =>
	q
		.selectFrom('token')
		.leftJoin('token_secret', 'token_secret.id', 'token.id')
		.selectAll('token')
		.select(['token_secret.label as label', 'token_secret.used_at as used_at'])
		.where('token.person', '=', person)
		.orderBy('token.created_at', 'desc');
