import type { PublicKeyCredentialCreationOptionsJSON } from '@simplewebauthn/server';
import type { Actor, PersonId } from '$lib/domain/actor';
import type { Ctx } from '$lib/server/context';
import type { Tx } from '$lib/server/db/handle';
import type { Schema } from '$lib/server/db/schema';
import { verifyNewPasskey, type NewPasskey } from '$lib/server/auth/attestation';
import { liveCredentials } from '$lib/server/auth/auth.queries';
import { credentialPayload, enrolCredential, revokeCredential } from '$lib/server/auth/credentials';
import { AuthFault } from '$lib/server/auth/fault';
import { limitsOf, network } from '$lib/server/auth/limits';
import { openLink, takeLink } from '$lib/server/auth/links';
import { enrolOptions } from '$lib/server/auth/options';
import { checkPassword, hashPassword } from '$lib/server/auth/passwords';
import { makeCodes } from '$lib/server/auth/recovery-codes';
import { closeSessions, openSession } from '$lib/server/auth/sessions';
import { record } from '$lib/server/log/record';
import { checkIdentity, directoryOf, enterEnrolled, nameInDirectory, type Identity } from './directory';
import { limitsFor, type Visitor } from './sign-in';
import { rolesOf, stateOf } from './standing';

/** What the holder of a link may know before enrolling. */
export interface Opened {
	readonly person: PersonId;
	readonly kind: Schema['enrolment_link']['kind'];
	readonly name: string;
	/** The first admins name themselves. */
	readonly needsIdentity: boolean;
}

/** Looks at a link. @throws AuthFault for every link that opens nothing; TooMany */
export const lookAtLink = async (ctx: Ctx, visitor: Visitor, secret: string): Promise<Opened> => {
	const limits = limitsOf(ctx);
	await limits.check('enrolment links an address', network(visitor.address));
	try {
		const { person, kind } = openLink(ctx, secret);
		if (stateOf(ctx.read, person as PersonId) === 'disabled')
			throw new AuthFault('disabled', 'The person is disabled.');
		const name = directoryOf(ctx.read, person as PersonId)?.name ?? '';
		return { person: person as PersonId, kind, name, needsIdentity: kind === 'first' && name === '' };
	} catch (fault) {
		if (fault instanceof AuthFault)
			await limits.count('enrolment links an address', network(visitor.address));
		throw fault;
	}
};

/** What is typed to enrol. */
export interface Typed {
	readonly secret: string;
	readonly password: string;
	/** For the first admins. */
	readonly identity?: Identity;
}

/** Passwords of people are checked against all that names them. */
const about = (ctx: Ctx, { name, mail }: { name: string; mail: string }): string[] => [
	name,
	mail.split('@')[0] ?? '',
	ctx.config.institution
];

/** Looks at the link and at what was typed. @throws Invalid, AuthFault, TooMany */
const checked = async (
	ctx: Ctx,
	visitor: Visitor,
	typed: Typed
): Promise<{ readonly opened: Opened; readonly identity?: Identity }> => {
	const opened = await lookAtLink(ctx, visitor, typed.secret);
	const identity = opened.needsIdentity
		? checkIdentity(typed.identity ?? { name: '', mail: '', staffNumber: '' })
		: undefined;
	checkPassword(typed.password, about(ctx, identity ?? directoryOf(ctx.read, opened.person)!));
	return { opened, ...(identity ? { identity } : {}) };
};

/**
 * What the browser needs to make the passkey of a link. What was typed is checked first: a passkey made for a form that
 * is then refused would stay on the device and open nothing.
 * @throws Invalid, AuthFault, TooMany
 */
export const optionsForLink = async (
	ctx: Ctx,
	visitor: Visitor,
	typed: Typed
): Promise<PublicKeyCredentialCreationOptionsJSON> => {
	const { opened, identity } = await checked(ctx, visitor, typed);
	const { handle, mail, name } = directoryOf(ctx.read, opened.person)!;
	const shown = identity?.name ?? name;
	const account = identity?.mail ?? (mail || shown);
	return enrolOptions(ctx, visitor.holder, {
		person: opened.person,
		handle,
		name: account,
		displayName: shown
	});
};

/** What a person posts to enrol. */
export interface Enrolling extends Typed {
	/** The browser's answer, as JSON. */
	readonly response: string;
}

/** Shown once: neither is stored in a form that could be shown again. */
export interface Enrolled {
	readonly token: string;
	readonly codes: readonly string[];
}

/** Stores a password and enters that there is one. */
const setPassword = (ctx: Ctx, tx: Tx, actor: Actor, person: PersonId, hash: string): void => {
	tx.remove('password', { person });
	tx.insert('password', { person, hash, set_at: ctx.now().toISOString() });
	record(
		ctx,
		tx,
		actor,
		{ rule: 'enrolment' },
		{
			type: 'password.set',
			subjects: [person],
			payload: { person }
		}
	);
};

/** Recovery replaces all that was: old passkeys are revoked once the new one stands. */
const enterPasskey = (
	ctx: Ctx,
	tx: Tx,
	actor: Actor,
	{ person, kind }: Opened,
	passkey: NewPasskey
): void => {
	const grant = { rule: 'enrolment' };
	const old = tx.all<Schema['credential']>(liveCredentials(tx.q, person));
	const { handle } = directoryOf(tx, person)!;
	// Revoked one by one beside the new key, so that the most that may stand at once is never passed.
	for (const { id } of old.slice(1)) revokeCredential(ctx, tx, actor, grant, person, id);
	enrolCredential(
		ctx,
		tx,
		actor,
		grant,
		credentialPayload(person, 'passkey', handle, passkey),
		passkey.counter
	);
	if (kind === 'recovery' && old[0]) revokeCredential(ctx, tx, actor, grant, person, old[0].id);
};

const enterAll = (
	ctx: Ctx,
	opened: Opened,
	{ secret, identity }: { secret: string; identity?: Identity },
	passkey: NewPasskey,
	hash: string,
	request: string
): readonly string[] => {
	const { person } = opened;
	const actor: Actor = {
		person,
		means: opened.kind === 'recovery' ? 'recovery' : 'passkey',
		roles: [],
		request
	};
	return ctx.write((tx) => {
		takeLink(ctx, tx, secret);
		if (identity) nameInDirectory(ctx, tx, person, identity);
		if (stateOf(tx, person) === 'invited') enterEnrolled(ctx, tx, actor, { rule: 'enrolment' }, person);
		enterPasskey(ctx, tx, actor, opened, passkey);
		setPassword(ctx, tx, actor, person, hash);
		closeSessions(ctx, tx, person, actor, 'credential changed');
		return makeCodes(ctx, tx, actor, { rule: 'enrolment' }, person);
	});
};

/**
 * Enrols the person of a link: passkey, password for recovery, ten recovery codes, first session. The link dies in the
 * same transaction; what is typed wrongly leaves it alive.
 * @throws Invalid for password or identity; AuthFault for link or passkey; TooMany
 */
export const enrol = async (ctx: Ctx, visitor: Visitor, sent: Enrolling): Promise<Enrolled> => {
	const { opened, identity } = await checked(ctx, visitor, sent);
	const passkey = await verifyNewPasskey(ctx, sent.response, visitor.holder, opened.person);
	const hash = await hashPassword(sent.password);
	const link = { secret: sent.secret, ...(identity ? { identity } : {}) };
	const codes = enterAll(ctx, opened, link, passkey, hash, visitor.request);
	const { person } = opened;
	const limits = limitsFor(rolesOf(ctx.read, person, ctx.now().toISOString()));
	const { agent, request } = visitor;
	const token = await openSession(ctx, person, {
		means: 'passkey',
		limits,
		agent,
		request,
		credential: passkey.id
	});
	return Object.freeze({ token, codes });
};
