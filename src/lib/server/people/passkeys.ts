import type { PublicKeyCredentialCreationOptionsJSON } from '@simplewebauthn/server';
import type { Actor } from '$lib/domain/actor';
import type { Payload } from '$lib/domain/events';
import { Conflict, Refused } from '$lib/domain/faults';
import type { Ctx } from '$lib/server/context';
import { verifyNewPasskey } from '$lib/server/auth/attestation';
import { liveCredentials } from '$lib/server/auth/auth.queries';
import { credentialPayload, enrolCredential, mostPasskeys } from '$lib/server/auth/credentials';
import { AuthFault } from '$lib/server/auth/fault';
import { enrolOptions } from '$lib/server/auth/options';
import { closeSessions } from '$lib/server/auth/sessions';
import {
	confirmSigned,
	prepareStepUp,
	type Signed,
	type StepUpRequest,
	type ToSign
} from '$lib/server/auth/step-up';
import { personIn } from './acts';
import { allow } from './allow';
import { directoryOf } from './directory';

type Enrolled = Payload<'credential.enrolled'>;

/** What the browser needs to make a further passkey of the person signed in. */
export const optionsForPasskey = (
	ctx: Ctx,
	actor: Actor
): Promise<PublicKeyCredentialCreationOptionsJSON> => {
	const person = personIn(actor);
	allow(ctx, ctx.read, actor, 'credential.enrol', { person });
	if (actor.means === 'seat')
		throw new Conflict('A demo seat signs with a key of the server; it takes no passkey.');
	if (ctx.read.all(liveCredentials(ctx.read.q, person)).length >= mostPasskeys)
		throw new Conflict(`A person holds at most ${mostPasskeys} passkeys; revoke one first.`);
	const { handle, mail, name } = directoryOf(ctx.read, person)!;
	return enrolOptions(ctx, actor.session!, { person, handle, name: mail || name, displayName: name });
};

const verified = async (ctx: Ctx, actor: Actor, response: string): Promise<Enrolled> => {
	const person = personIn(actor);
	try {
		const passkey = await verifyNewPasskey(ctx, response, actor.session!, person);
		return credentialPayload(person, 'passkey', directoryOf(ctx.read, person)!.handle, passkey);
	} catch (fault) {
		if (!(fault instanceof AuthFault)) throw fault;
		throw new Refused('passkey', 'credential.enrol', `The passkey was not taken: ${fault.message}`);
	}
};

const toSign = (payload: Enrolled): ToSign => ({
	action: 'credential.enrol',
	decision: 'enrol',
	subject: payload.person,
	payload
});

const enter = (ctx: Ctx, actor: Actor, payload: Enrolled, signed?: Signed): void => {
	const person = personIn(actor);
	ctx.write((tx) => {
		const grant = allow(ctx, tx, actor, 'credential.enrol', { person });
		const stepUp = signed && confirmSigned(ctx, tx, actor, signed, toSign(payload));
		enrolCredential(ctx, tx, actor, grant, payload, 0, stepUp);
		closeSessions(ctx, tx, person, actor, 'credential changed', actor.session);
	});
};

/**
 * Takes a new passkey. In a recovery session it is entered at once; otherwise a passkey enrolled before must sign it,
 * key and all, so that whoever holds only a stolen session adds none.
 * @returns the statement to sign, or undefined when the passkey is entered
 * @throws Refused, Conflict
 */
export const receivePasskey = async (
	ctx: Ctx,
	actor: Actor,
	response: string
): Promise<StepUpRequest | undefined> => {
	allow(ctx, ctx.read, actor, 'credential.enrol', { person: personIn(actor) });
	const payload = await verified(ctx, actor, response);
	if (actor.means !== 'recovery') return prepareStepUp(ctx, actor, toSign(payload));
	enter(ctx, actor, payload);
	return undefined;
};

/** Enters a further passkey that an older one has signed. @throws Refused, Conflict */
export const addPasskey = (ctx: Ctx, actor: Actor, signed: Signed): void => {
	if (signed.statement.action !== 'credential.enrol') throw new Conflict('Another act was signed.');
	enter(ctx, actor, signed.payload as Enrolled, signed);
};
