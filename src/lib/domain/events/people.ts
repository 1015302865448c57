import { z } from 'zod';
import { roles, scopes } from '../actor';
import { event } from './event';

const person = z.string().regex(/^p_[a-z2-7]{26}$/);
const role = z.enum(roles);
const instant = z.iso.datetime({ precision: 3 });
const digest = z.string().regex(/^sha256:[0-9a-f]{64}$/);
const base64url = z.string().regex(/^[A-Za-z0-9_-]+$/);
const session = z.string().regex(/^s_[a-z2-7]{16}$/);
const folio = z.number().int().min(0);

/** An act that two admins sign over the same statement. */
export const pairedActs = ['role.grant', 'person.re-enable', 'recovery.start'] as const;
export type PairedAct = (typeof pairedActs)[number];

export const closings = [
	'signed out',
	'idle',
	'absolute',
	'too many',
	'credential changed',
	'role changed',
	'disabled',
	'ended'
] as const;
export type Closing = (typeof closings)[number];

/** Why a sign-in failed, in words that name no account. */
export const failures = [
	'request',
	'challenge',
	'unknown credential',
	'revoked credential',
	'client data',
	'authenticator data',
	'backup flag',
	'signature',
	'user handle',
	'password or code',
	'disabled',
	'too many tries'
] as const;
export type Failure = (typeof failures)[number];

/** What the first admin proposed and the second approves; `proposal` and `statement` bind the second to the first. */
const approval = { proposal: folio.optional(), statement: digest.optional() };

/** Events of the people and auth rooms: random ids only, never a name, an address, a token or a challenge. */
export const peopleEvents = {
	'person.invited': event(1, { 1: z.strictObject({ person }) }),
	'invitation.renewed': event(1, { 1: z.strictObject({ person }) }),
	'person.enrolled': event(1, { 1: z.strictObject({ person, identity: digest }) }),
	'person.disabled': event(1, { 1: z.strictObject({ person }) }),
	'person.re-enabled': event(1, { 1: z.strictObject({ person, ...approval }) }),
	'recovery.started': event(1, {
		1: z.strictObject({ person, recognised: z.enum(['in person', 'by video', 'by telephone']), ...approval })
	}),
	'grant.proposed': event(1, {
		1: z.strictObject({
			act: z.enum(pairedActs),
			person,
			role: role.optional(),
			from: instant.optional(),
			expires: instant
		})
	}),
	'grant.withdrawn': event(1, { 1: z.strictObject({ proposal: folio }) }),
	'role.granted': event(1, { 1: z.strictObject({ person, role, from: instant, ...approval }) }),
	'role.ended': event(1, { 1: z.strictObject({ person, role, until: instant }) }),
	'credential.enrolled': event(1, {
		1: z.strictObject({
			person,
			credential: base64url,
			kind: z.enum(['passkey', 'seat']),
			/** COSE_Key of RFC 9052. */
			publicKey: base64url,
			algorithm: z.number().int(),
			/** WebAuthn user handle. */
			handle: base64url,
			backupEligible: z.boolean(),
			backedUp: z.boolean(),
			aaguid: z.string(),
			transports: z.array(z.string().regex(/^[a-z-]{1,32}$/)).max(8)
		})
	}),
	'credential.revoked': event(1, { 1: z.strictObject({ person, credential: base64url }) }),
	'credential.counter-fell': event(1, {
		1: z.strictObject({ person, credential: base64url, stored: folio, received: folio })
	}),
	'credential.backup-changed': event(1, {
		1: z.strictObject({ person, credential: base64url, enrolled: z.boolean(), received: z.boolean() })
	}),
	'password.set': event(1, { 1: z.strictObject({ person }) }),
	'recovery-codes.made': event(1, { 1: z.strictObject({ person, count: folio }) }),
	'recovery-code.used': event(1, { 1: z.strictObject({ person, left: folio }) }),
	'session.opened': event(1, {
		1: z.strictObject({ person, session, credential: base64url.optional() })
	}),
	'session.closed': event(1, { 1: z.strictObject({ person, session, reason: z.enum(closings) }) }),
	'sessions.ended': event(1, { 1: z.strictObject({ person }) }),
	'sign-in.failed': event(1, {
		1: z.strictObject({
			way: z.enum(['passkey', 'recovery', 'seat']),
			reason: z.enum(failures),
			person: person.optional()
		})
	}),
	'access.refused': event(1, {
		1: z.strictObject({
			action: z.string().max(64),
			rule: z.string().max(64),
			subject: z.string().max(64).optional()
		})
	}),
	'token.created': event(1, {
		1: z.strictObject({
			person,
			token: z.string().regex(/^[a-z2-7]{10}$/),
			scopes: z.array(z.enum(scopes)).min(1),
			expires: instant
		})
	}),
	'token.revoked': event(1, {
		1: z.strictObject({
			person,
			token: z.string().regex(/^[a-z2-7]{10}$/),
			reason: z.enum(['asked', 'disclosed', 'disabled'])
		})
	})
} as const;
