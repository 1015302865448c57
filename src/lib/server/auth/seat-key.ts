import { createPrivateKey, generateKeyPairSync, randomBytes, sign } from 'node:crypto';
import { sha256 } from '$lib/chain/digest';
import { rawPublicKey } from '$lib/chain/ed25519';
import { challengeOf, flag } from '$lib/chain/step-up';
import type { PersonId } from '$lib/domain/actor';
import type { StepUp } from '$lib/domain/entry';
import type { Config } from '$lib/server/config';
import type { Tx } from '$lib/server/db/handle';
import type { Schema } from '$lib/server/db/schema';
import type { NewPasskey } from './attestation';
import { rpIdOf } from './assertion';

/** COSE_Key of an Ed25519 key: kty OKP, alg EdDSA, crv Ed25519, x (RFC 9053). */
const coseKey = (raw: Buffer): Buffer => Buffer.concat([Buffer.from('a4010103272006215820', 'hex'), raw]);

/**
 * Makes the key a demo seat signs with. The server holds it, so it proves nothing about a person; the entry that
 * enrols it says `kind: seat`, and verifiers name it.
 */
export const makeSeatKey = (tx: Tx, person: PersonId): NewPasskey => {
	const { privateKey, publicKey } = generateKeyPairSync('ed25519');
	const id = randomBytes(16).toString('base64url');
	tx.insert('seat_key', {
		person,
		credential: id,
		key: privateKey.export({ format: 'der', type: 'pkcs8' }).toString('base64')
	});
	return Object.freeze({
		id,
		publicKey: coseKey(rawPublicKey(publicKey)).toString('base64url'),
		algorithm: -8,
		backupEligible: false,
		backedUp: false,
		aaguid: '00000000-0000-0000-0000-000000000000',
		transports: [],
		counter: 0
	});
};

/** Signs a statement in the form an authenticator would, so that one verifier reads both. */
export const signAsSeat = (
	config: Config,
	{ key, credential }: Schema['seat_key'],
	statement: string
): StepUp => {
	const clientData = Buffer.from(
		JSON.stringify({
			type: 'webauthn.get',
			challenge: challengeOf(statement).toString('base64url'),
			origin: config.origin,
			crossOrigin: false
		})
	);
	const authenticatorData = Buffer.alloc(37);
	sha256(Buffer.from(rpIdOf(config), 'utf8')).copy(authenticatorData);
	authenticatorData[32] = flag.up | flag.uv;
	const privateKey = createPrivateKey({ key: Buffer.from(key, 'base64'), format: 'der', type: 'pkcs8' });
	const signature = sign(null, Buffer.concat([authenticatorData, sha256(clientData)]), privateKey);
	return Object.freeze({
		statement,
		credential,
		authenticatorData: authenticatorData.toString('base64url'),
		clientDataJSON: clientData.toString('base64url'),
		signature: signature.toString('base64url')
	});
};
