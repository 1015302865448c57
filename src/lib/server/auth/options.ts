import {
	generateAuthenticationOptions,
	generateRegistrationOptions,
	type AuthenticatorTransport,
	type PublicKeyCredentialCreationOptionsJSON,
	type PublicKeyCredentialRequestOptionsJSON
} from '@simplewebauthn/server';
import { algorithms } from '$lib/chain/cose-key';
import type { PersonId } from '$lib/domain/actor';
import type { Ctx } from '$lib/server/context';
import type { Schema } from '$lib/server/db/schema';
import { rpIdOf } from './assertion';
import { liveCredentials } from './auth.queries';
import { issueChallenge } from './challenge';

const timeout = 300_000;

const named = (ctx: Ctx, person: PersonId): { id: string; transports: AuthenticatorTransport[] }[] =>
	ctx.read
		.all<Schema['credential']>(liveCredentials(ctx.read.q, person))
		.filter(({ kind }) => kind === 'passkey')
		.map(({ id, transports }) => ({
			id,
			transports: JSON.parse(transports) as AuthenticatorTransport[]
		}));

/** What a browser needs to sign in: no account is named, so the answer tells nothing about who exists. */
export const signInOptions = (ctx: Ctx, holder: string): Promise<PublicKeyCredentialRequestOptionsJSON> =>
	generateAuthenticationOptions({
		rpID: rpIdOf(ctx.config),
		challenge: new Uint8Array(issueChallenge(ctx, { kind: 'sign-in', holder })),
		userVerification: 'required',
		timeout
	});

/** What a browser needs to sign a statement with a passkey of this person. */
export const stepUpOptions = (
	ctx: Ctx,
	person: PersonId,
	challenge: Buffer
): Promise<PublicKeyCredentialRequestOptionsJSON> =>
	generateAuthenticationOptions({
		rpID: rpIdOf(ctx.config),
		// Bytes, not text: a text would be encoded once more.
		challenge: new Uint8Array(challenge),
		allowCredentials: named(ctx, person),
		userVerification: 'required',
		timeout
	});

/** Whom a new passkey is for, as the authenticator will show it. */
export interface Enrolling {
	readonly person: PersonId;
	readonly handle: Buffer;
	readonly name: string;
	readonly displayName: string;
}

/** What a browser needs to make a passkey. */
export const enrolOptions = (
	ctx: Ctx,
	holder: string,
	{ person, handle, name, displayName }: Enrolling
): Promise<PublicKeyCredentialCreationOptionsJSON> =>
	generateRegistrationOptions({
		rpID: rpIdOf(ctx.config),
		rpName: `Keelbook, ${ctx.config.institution}`,
		userID: new Uint8Array(handle),
		userName: name,
		userDisplayName: displayName,
		challenge: new Uint8Array(issueChallenge(ctx, { kind: 'enrol', holder, person })),
		attestationType: 'none',
		authenticatorSelection: { residentKey: 'required', userVerification: 'required' },
		supportedAlgorithmIDs: [...algorithms],
		excludeCredentials: named(ctx, person),
		timeout
	});
