import { verifyRegistrationResponse } from '@simplewebauthn/server';
import { decodeAttestationObject, parseAuthenticatorData } from '@simplewebauthn/server/helpers';
import { z } from 'zod';
import { algorithms, publicKeyOf } from '$lib/chain/cose-key';
import type { PersonId } from '$lib/domain/actor';
import type { Ctx } from '$lib/server/context';
import { credentialById, credentialByKey } from './auth.queries';
import { rpIdOf } from './assertion';
import {
	challengeIn,
	checkAuthenticatorData,
	checkClientData,
	clientDataOf,
	readAnswer,
	strictBytes
} from './ceremony';
import { dropChallenges, takeChallenge } from './challenge';
import { AuthFault } from './fault';

const answer = z.object({
	id: z.string().min(1),
	rawId: z.string(),
	type: z.literal('public-key'),
	response: z.object({
		clientDataJSON: z.string(),
		attestationObject: z.string(),
		transports: z
			.array(z.string().regex(/^[a-z-]{1,32}$/))
			.max(8)
			.default([])
	})
});
type Answer = z.output<typeof answer>;

/** A passkey as an authenticator made it, verified. */
export interface NewPasskey {
	readonly id: string;
	/** COSE_Key, base64url. */
	readonly publicKey: string;
	readonly algorithm: number;
	readonly backupEligible: boolean;
	readonly backedUp: boolean;
	readonly aaguid: string;
	readonly transports: readonly string[];
	readonly counter: number;
}

interface Attested {
	readonly authData: Buffer;
	readonly id: Buffer;
	readonly key: Buffer;
}

const wrong = (words: string): AuthFault => new AuthFault('authenticator data', words);

/** The authenticator data inside the attestation object, and the credential in them. */
const attestedIn = (bytes: Buffer): Attested => {
	try {
		const authData = Buffer.from(decodeAttestationObject(new Uint8Array(bytes)).get('authData'));
		const { credentialID, credentialPublicKey } = parseAuthenticatorData(new Uint8Array(authData));
		if (!credentialID || !credentialPublicKey) throw new Error('there is no credential in it');
		return { authData, id: Buffer.from(credentialID), key: Buffer.from(credentialPublicKey) };
	} catch (cause) {
		throw wrong(
			`The attestation object is unreadable: ${cause instanceof Error ? cause.message : 'broken'}.`
		);
	}
};

const checkCredential = (ctx: Ctx, sent: Answer, { id, key }: Attested): number => {
	if (id.length > 1023) throw wrong('The credential id is longer than 1,023 bytes.');
	if (id.toString('base64url') !== sent.id) throw wrong('Another credential was attested than was named.');
	const { read } = ctx;
	if (
		read.first(credentialById(read.q, sent.id)) ||
		read.first(credentialByKey(read.q, key.toString('base64url')))
	)
		throw wrong('This credential is enrolled already.');
	try {
		return publicKeyOf(key).algorithm;
	} catch (cause) {
		throw wrong(cause instanceof Error ? cause.message : 'The key is malformed.');
	}
};

const checkByLibrary = async (ctx: Ctx, sent: Answer, challenge: string): Promise<string> => {
	const { response } = sent;
	const result = await verifyRegistrationResponse({
		response: {
			id: sent.id,
			rawId: sent.rawId,
			type: sent.type,
			clientExtensionResults: {},
			response: { clientDataJSON: response.clientDataJSON, attestationObject: response.attestationObject }
		},
		expectedChallenge: challenge,
		expectedOrigin: [ctx.config.origin],
		expectedRPID: rpIdOf(ctx.config),
		requireUserVerification: true,
		supportedAlgorithmIDs: [...algorithms]
	}).catch((cause: unknown) => {
		throw new AuthFault('signature', cause instanceof Error ? cause.message : 'not verified');
	});
	if (!result.verified) throw new AuthFault('signature', 'The attestation does not verify.');
	return result.registrationInfo.aaguid;
};

/**
 * Verifies a new passkey (WebAuthn Level 3, section 7.1) and what the library leaves open: framing, the exact form of
 * the key, that neither id nor key is known. The challenge is consumed before anything is judged.
 * @throws AuthFault with the first thing that is wrong
 */
export const verifyNewPasskey = async (
	ctx: Ctx,
	text: string,
	holder: string,
	person: PersonId
): Promise<NewPasskey> => {
	let sent: Answer;
	let clientData: ReturnType<typeof clientDataOf>;
	let object: Buffer;
	try {
		const result = answer.safeParse(readAnswer(text));
		if (!result.success || result.data.id !== result.data.rawId)
			throw new AuthFault('request', 'The answer lacks a part or holds one of another kind.');
		sent = result.data;
		strictBytes('id', sent.id);
		object = strictBytes('attestationObject', sent.response.attestationObject);
		clientData = clientDataOf(strictBytes('clientDataJSON', sent.response.clientDataJSON));
		challengeIn(clientData);
	} catch (fault) {
		dropChallenges(ctx, 'enrol', holder);
		throw fault;
	}
	const row = takeChallenge(ctx, challengeIn(clientData), 'enrol', holder);
	if (row.person !== person) throw new AuthFault('challenge', 'The challenge was another person’s.');
	checkClientData(clientData, 'webauthn.create', [ctx.config.origin]);
	const attested = attestedIn(object);
	const flags = checkAuthenticatorData(attested.authData, rpIdOf(ctx.config));
	const algorithm = checkCredential(ctx, sent, attested);
	const aaguid = await checkByLibrary(ctx, sent, clientData.challenge);
	return Object.freeze({
		...flags,
		id: sent.id,
		publicKey: attested.key.toString('base64url'),
		algorithm,
		aaguid,
		transports: sent.response.transports
	});
};
