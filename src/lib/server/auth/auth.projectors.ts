import { canonical } from '$lib/chain/canonical';
import type { Projectors } from '$lib/server/context';

/** Credentials and tokens as the log says them. */
export const authProjectors: Projectors = {
	'credential.enrolled': (tx, { seq, at, payload }) =>
		tx.insert('credential', {
			id: payload.credential,
			person: payload.person,
			kind: payload.kind,
			public_key: payload.publicKey,
			algorithm: payload.algorithm,
			handle: payload.handle,
			backup_eligible: payload.backupEligible ? 1 : 0,
			aaguid: payload.aaguid,
			transports: canonical(payload.transports),
			enrolled_at: at,
			revoked_at: null,
			counter_fell_at: null,
			entry: seq
		}),
	'credential.revoked': (tx, { seq, at, payload }) =>
		tx.update('credential', { id: payload.credential }, { revoked_at: at, entry: seq }),
	'credential.counter-fell': (tx, { seq, at, payload }) =>
		tx.update('credential', { id: payload.credential }, { counter_fell_at: at, entry: seq }),
	'token.created': (tx, { seq, at, payload }) =>
		tx.insert('token', {
			id: payload.token,
			person: payload.person,
			scopes: canonical(payload.scopes),
			created_at: at,
			expires_at: payload.expires,
			revoked_at: null,
			entry: seq
		}),
	'token.revoked': (tx, { seq, at, payload }) =>
		tx.update('token', { id: payload.token }, { revoked_at: at, entry: seq })
};
