import { timingSafeEqual } from 'node:crypto';
import { verifyAuthenticationResponse } from '@simplewebauthn/server';
import { parseAuthenticatorData } from '@simplewebauthn/server/helpers';
import { z } from 'zod';
import type { PersonId } from '$lib/domain/actor';
import type { Config } from '$lib/server/config';
import type { Ctx } from '$lib/server/context';
import type { Schema } from '$lib/server/db/schema';
import { credentialById } from './auth.queries';
import {
	challengeIn,
	checkAuthenticatorData,
	checkClientData,
	clientDataOf,
	readAnswer,
	strictBytes,
	type AuthenticatorFlags
} from './ceremony';
import { dropChallenges, takeChallenge, type ChallengeKind } from './challenge';
import { AuthFault } from './fault';

type Credential = Schema['credential'];

const answer = z.object({
	id: z.string().min(1),
	rawId: z.string(),
	type: z.literal('public-key'),
	authenticatorAttachment: z.enum(['platform', 'cross-platform']).optional(),
	clientExtensionResults: z.record(z.string(), z.unknown()).default({}),
	response: z.object({
		clientDataJSON: z.string(),
		authenticatorData: z.string(),
		signature: z.string(),
		userHandle: z.string().optional()
	})
});
type Answer = z.output<typeof answer>;

/** A verified signature of a passkey. */
export interface Assertion {
	readonly person: PersonId;
	readonly credential: string;
	readonly flags: AuthenticatorFlags;
	/** The row of the challenge it answered. */
	readonly challenge: Schema['challenge'];
	/** As sent, for the entry that keeps the signature. */
	readonly response: {
		readonly authenticatorData: string;
		readonly clientDataJSON: string;
		readonly signature: string;
	};
}

/** What the host is called in the eyes of authenticators: from the settings, never from a header. */
export const rpIdOf = (config: Config): string => new URL(config.origin).hostname;

const parsed = (text: string): Answer => {
	const result = answer.safeParse(readAnswer(text));
	if (!result.success)
		throw new AuthFault('request', 'The answer lacks a part or holds one of another kind.');
	if (result.data.id !== result.data.rawId)
		throw new AuthFault('request', 'The two ids of the answer differ.');
	return result.data;
};

/** No byte more than the flags announce: the library throws on what is left over. */
const checkLength = (bytes: Buffer): void => {
	try {
		parseAuthenticatorData(new Uint8Array(bytes));
	} catch (cause) {
		throw new AuthFault('authenticator data', cause instanceof Error ? cause.message : 'unreadable');
	}
};

const knownCredential = (ctx: Ctx, id: string): Credential => {
	const credential = ctx.read.first<Credential>(credentialById(ctx.read.q, id));
	if (!credential || credential.kind !== 'passkey')
		throw new AuthFault('unknown credential', 'No such passkey is enrolled.');
	if (credential.revoked_at !== null) throw new AuthFault('revoked credential', 'The passkey was revoked.');
	return credential;
};

const checkHandle = (credential: Credential, sent: string | undefined, discoverable: boolean): void => {
	if (sent === undefined || sent === '') {
		// An authenticator may leave it out where the page named the credential.
		if (!discoverable) return;
		throw new AuthFault('user handle', 'A discoverable passkey sends its user handle.');
	}
	const [a, b] = [strictBytes('userHandle', sent), Buffer.from(credential.handle, 'base64url')];
	if (a.length !== b.length || !timingSafeEqual(a, b))
		throw new AuthFault('user handle', 'The user handle is not that of the owner.');
};

/** The signature itself: the library's part. Its own counter rule is switched off; ours never locks anyone out. */
const checkSignature = async (
	ctx: Ctx,
	sent: Answer,
	credential: Credential,
	challenge: string
): Promise<void> => {
	const { userHandle, ...rest } = sent.response;
	const result = await verifyAuthenticationResponse({
		response: {
			id: sent.id,
			rawId: sent.rawId,
			type: sent.type,
			clientExtensionResults: {},
			response: { ...rest, ...(userHandle ? { userHandle } : {}) }
		},
		expectedChallenge: challenge,
		expectedOrigin: [ctx.config.origin],
		expectedRPID: rpIdOf(ctx.config),
		requireUserVerification: true,
		credential: {
			id: credential.id,
			publicKey: new Uint8Array(Buffer.from(credential.public_key, 'base64url')),
			counter: 0
		}
	}).catch((cause: unknown) => {
		throw new AuthFault('signature', cause instanceof Error ? cause.message : 'not verified');
	});
	if (!result.verified) throw new AuthFault('signature', 'The signature is not that of the passkey.');
	if (result.authenticationInfo.credentialID !== credential.id)
		throw new AuthFault('unknown credential', 'Another passkey was verified than was named.');
};

/**
 * Verifies the answer of an authenticator (WebAuthn Level 3, section 7.2), stricter than the library in what it leaves
 * open. The challenge is consumed before anything is judged.
 * @throws AuthFault with the first thing that is wrong
 */
export const verifyAssertion = async (
	ctx: Ctx,
	text: string,
	kind: Extract<ChallengeKind, 'sign-in' | 'step-up'>,
	holder: string
): Promise<Assertion> => {
	let read: { sent: Answer; clientData: ReturnType<typeof clientDataOf>; authenticatorData: Buffer };
	try {
		const sent = parsed(text);
		const { response } = sent;
		strictBytes('id', sent.id);
		strictBytes('signature', response.signature);
		const authenticatorData = strictBytes('authenticatorData', response.authenticatorData);
		const clientData = clientDataOf(strictBytes('clientDataJSON', response.clientDataJSON));
		read = { sent, clientData, authenticatorData };
		challengeIn(clientData);
	} catch (fault) {
		dropChallenges(ctx, kind, holder);
		throw fault;
	}
	const { sent, clientData, authenticatorData } = read;
	const challenge = takeChallenge(ctx, challengeIn(clientData), kind, holder);
	checkClientData(clientData, 'webauthn.get', [ctx.config.origin]);
	const flags = checkAuthenticatorData(authenticatorData, rpIdOf(ctx.config));
	checkLength(authenticatorData);
	const credential = knownCredential(ctx, sent.id);
	checkHandle(credential, sent.response.userHandle, kind === 'sign-in');
	if (challenge.person !== null && challenge.person !== credential.person)
		throw new AuthFault('user handle', 'The passkey is another person’s.');
	await checkSignature(ctx, sent, credential, clientData.challenge);
	if (flags.backupEligible !== (credential.backup_eligible === 1))
		throw new BackupChanged(credential.person as PersonId, credential.id, flags.backupEligible);
	const { authenticatorData: data, clientDataJSON, signature } = sent.response;
	return Object.freeze({
		person: credential.person as PersonId,
		credential: credential.id,
		flags,
		challenge,
		response: { authenticatorData: data, clientDataJSON, signature }
	});
};

/** Eligibility for backup is fixed for the life of a credential: a change is refused, and entered. */
export class BackupChanged extends AuthFault {
	constructor(
		readonly person: PersonId,
		readonly credential: string,
		readonly received: boolean
	) {
		super('backup flag', 'The eligibility for backup is not the enrolled one.');
	}
}
