import type { Actor, PersonId } from '$lib/domain/actor';
import type { Grant, StepUp } from '$lib/domain/entry';
import type { Payload } from '$lib/domain/events';
import { Absent, Conflict } from '$lib/domain/faults';
import type { Ctx } from '$lib/server/context';
import type { Tx } from '$lib/server/db/handle';
import type { Schema } from '$lib/server/db/schema';
import { record } from '$lib/server/log/record';
import type { Assertion } from './assertion';
import type { NewPasskey } from './attestation';
import { credentialById, credentialUse, liveCredentials } from './auth.queries';

/** A person holds at most this many passkeys. */
export const mostPasskeys = 8;

/** What the log says of a credential. */
export const credentialPayload = (
	person: PersonId,
	kind: 'passkey' | 'seat',
	handle: Buffer,
	{ id, publicKey, algorithm, backupEligible, backedUp, aaguid, transports }: NewPasskey
): Payload<'credential.enrolled'> => ({
	person,
	credential: id,
	kind,
	publicKey,
	algorithm,
	handle: handle.toString('base64url'),
	backupEligible,
	backedUp,
	aaguid,
	transports: [...transports]
});

/** Enters a verified passkey. @throws Conflict beyond eight */
export const enrolCredential = (
	ctx: Ctx,
	tx: Tx,
	actor: Actor,
	grant: Grant,
	payload: Payload<'credential.enrolled'>,
	counter: number,
	stepUp?: StepUp
): void => {
	if (tx.all(liveCredentials(tx.q, payload.person as PersonId)).length >= mostPasskeys)
		throw new Conflict(`A person holds at most ${mostPasskeys} passkeys; revoke one first.`);
	if (tx.first(credentialById(tx.q, payload.credential)))
		throw new Conflict('This passkey is enrolled already.');
	tx.insert('credential_use', { id: payload.credential, counter, used_at: null });
	record(ctx, tx, actor, grant, {
		type: 'credential.enrolled',
		subjects: [payload.person],
		payload,
		...(stepUp ? { stepUp } : {})
	});
};

/** Revokes a passkey; one at least remains. @throws Absent, Conflict */
export const revokeCredential = (
	ctx: Ctx,
	tx: Tx,
	actor: Actor,
	grant: Grant,
	person: PersonId,
	id: string,
	stepUp?: StepUp
): void => {
	const credential = tx.first<Schema['credential']>(credentialById(tx.q, id));
	if (!credential || credential.person !== person) throw new Absent('There is no such passkey.');
	if (credential.revoked_at !== null) throw new Conflict('The passkey was revoked before.');
	if (tx.all(liveCredentials(tx.q, person)).length < 2)
		throw new Conflict('This is the last passkey; enrol another before revoking it.');
	record(ctx, tx, actor, grant, {
		type: 'credential.revoked',
		subjects: [person],
		payload: { person, credential: id },
		...(stepUp ? { stepUp } : {})
	});
};

/**
 * Keeps the authenticator's counter. One that did not rise may mean a copied key, or a synced key that started again:
 * it is accepted, marked and entered, and never locks anybody out.
 */
export const noteUse = (ctx: Ctx, tx: Tx, actor: Actor, { person, credential, flags }: Assertion): void => {
	const { counter: stored } = tx.first<Schema['credential_use']>(credentialUse(tx.q, credential))!;
	const received = flags.counter;
	tx.update(
		'credential_use',
		{ id: credential },
		{ counter: Math.max(stored, received), used_at: ctx.now().toISOString() }
	);
	if (received > stored || (received === 0 && stored === 0)) return;
	record(
		ctx,
		tx,
		actor,
		{ rule: 'counter' },
		{
			type: 'credential.counter-fell',
			subjects: [person],
			payload: { person, credential, stored, received }
		}
	);
};
