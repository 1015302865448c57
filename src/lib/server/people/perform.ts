import type { Actor, PersonId } from '$lib/domain/actor';
import type { Grant, StepUp } from '$lib/domain/entry';
import type { EventType, Payload } from '$lib/domain/events';
import type { Ctx } from '$lib/server/context';
import type { Tx } from '$lib/server/db/handle';
import type { Schema } from '$lib/server/db/schema';
import { tokensOf } from '$lib/server/auth/auth.queries';
import { revokeCredential } from '$lib/server/auth/credentials';
import { linkUrl, makeLink } from '$lib/server/auth/links';
import { makeCodes } from '$lib/server/auth/recovery-codes';
import { closeSessions } from '$lib/server/auth/sessions';
import { confirmSigned, prepareStepUp, type Signed, type StepUpRequest } from '$lib/server/auth/step-up';
import { makeToken } from '$lib/server/auth/tokens';
import { record } from '$lib/server/log/record';
import { plan, type Act, type Planned } from './acts';
import { allow } from './allow';
import { checkAct } from './act-checks';
import { checkIdentity, enterDirectory, enterInvited, type Identity } from './directory';

/** What an act gives back: shown once, stored nowhere. */
export type Outcome =
	| { readonly kind: 'done'; readonly person: PersonId }
	| { readonly kind: 'link'; readonly person: PersonId; readonly url: string }
	| { readonly kind: 'codes'; readonly person: PersonId; readonly codes: readonly string[] }
	| { readonly kind: 'token'; readonly person: PersonId; readonly token: string };

/** What is typed beside an act and stays outside the log. */
export interface Beside {
	readonly identity?: Identity;
	/** What the owner of a token calls it. */
	readonly label?: string;
}

/** Checks an act and builds the statement its actor is to sign. @throws Refused, Absent, Conflict, Invalid */
export const prepare = async (
	ctx: Ctx,
	actor: Actor,
	act: Act,
	beside: Beside = {}
): Promise<StepUpRequest & { readonly payload: Planned['payload'] }> => {
	const planned = plan(ctx, ctx.read, act);
	allow(ctx, ctx.read, actor, planned.action, planned.about);
	checkAct(ctx, ctx.read, act, beside);
	return { ...(await prepareStepUp(ctx, actor, planned)), payload: planned.payload };
};

interface Doing {
	readonly ctx: Ctx;
	readonly tx: Tx;
	readonly actor: Actor;
	readonly grant: Grant;
	readonly stepUp: StepUp;
	readonly payload: Planned['payload'];
	readonly person: PersonId;
	readonly beside: Beside;
}

const enter = <T extends EventType>(
	{ ctx, tx, actor, grant, stepUp, payload, person }: Doing,
	type: T
): void => {
	record(ctx, tx, actor, grant, { type, subjects: [person], payload: payload as Payload<T>, stepUp });
};

const done = ({ person }: Doing): Outcome => ({ kind: 'done', person });

const link = ({ ctx, tx, person }: Doing, kind: 'invitation' | 'recovery'): Outcome => ({
	kind: 'link',
	person,
	url: linkUrl(ctx, makeLink(ctx, tx, person, kind))
});

/** Sessions of the person end; the actor's own goes on when they act upon themselves. */
const endOthers = (
	{ ctx, tx, actor, person }: Doing,
	reason: 'credential changed' | 'role changed' | 'ended'
): void => closeSessions(ctx, tx, person, actor, reason, actor.person === person ? actor.session : undefined);

const revokeTokens = ({ ctx, tx, actor, grant, person }: Doing): void => {
	for (const { id, revoked_at } of tx.all<Schema['token']>(tokensOf(tx.q, person)))
		if (revoked_at === null)
			record(ctx, tx, actor, grant, {
				type: 'token.revoked',
				subjects: [person],
				payload: { person, token: id, reason: 'disabled' }
			});
};

const approve = (doing: Doing, action: Planned['action']): Outcome => {
	if (action === 'role.approve') enter(doing, 'role.granted');
	else if (action === 'person.re-enable') enter(doing, 'person.re-enabled');
	else {
		enter(doing, 'recovery.started');
		return link(doing, 'recovery');
	}
	endOthers(doing, 'role changed');
	return done(doing);
};

const invite = (doing: Doing): Outcome => {
	const { ctx, tx, actor, grant, person, stepUp, beside } = doing;
	enterDirectory(ctx, tx, person, checkIdentity(beside.identity ?? { name: '', mail: '', staffNumber: '' }));
	enterInvited(ctx, tx, actor, grant, person, stepUp);
	return link(doing, 'invitation');
};

const carryOut = (act: Act, planned: Planned, doing: Doing): Outcome => {
	const { ctx, tx, actor, grant, stepUp, person } = doing;
	switch (act.kind) {
		case 'invite':
			return invite(doing);
		case 'renew-invitation':
			enter(doing, 'invitation.renewed');
			return link(doing, 'invitation');
		case 'grant':
			if (planned.action === 'role.propose') enter(doing, 'grant.proposed');
			else {
				enter(doing, 'role.granted');
				endOthers(doing, 'role changed');
			}
			return done(doing);
		case 're-enable':
		case 'recover':
			enter(doing, 'grant.proposed');
			return done(doing);
		case 'approve':
			return approve(doing, planned.action);
		case 'end-role':
			enter(doing, 'role.ended');
			endOthers(doing, 'role changed');
			return done(doing);
		case 'disable':
			enter(doing, 'person.disabled');
			closeSessions(ctx, tx, person, actor, 'disabled');
			revokeTokens(doing);
			return done(doing);
		case 'end-sessions':
			enter(doing, 'sessions.ended');
			closeSessions(ctx, tx, person, actor, 'ended');
			return done(doing);
		case 'revoke-passkey':
			revokeCredential(ctx, tx, actor, grant, person, act.credential, stepUp);
			endOthers(doing, 'credential changed');
			return done(doing);
		case 'renew-codes':
			return { kind: 'codes', person, codes: makeCodes(ctx, tx, actor, grant, person, stepUp) };
		case 'create-token':
			enter(doing, 'token.created');
			return {
				kind: 'token',
				person,
				token: makeToken(tx, tokenIn(doing.payload), doing.beside.label ?? '')
			};
		case 'revoke-token':
			enter(doing, 'token.revoked');
			return done(doing);
	}
};

const tokenIn = (payload: Planned['payload']): string => {
	const { token } = payload as Payload<'token.created'>;
	return token;
};

/**
 * Does a signed act: authorised, checked and compared with what was signed inside one transaction.
 * @throws Refused, Absent, Conflict, Invalid
 */
export const perform = (ctx: Ctx, actor: Actor, act: Act, signed: Signed, beside: Beside = {}): Outcome =>
	ctx.write((tx) => {
		const planned = plan(ctx, tx, act, signed.payload);
		const grant = allow(ctx, tx, actor, planned.action, planned.about);
		checkAct(ctx, tx, act, beside);
		const stepUp = confirmSigned(ctx, tx, actor, signed, planned);
		const { payload, subject } = planned;
		return carryOut(act, planned, {
			ctx,
			tx,
			actor,
			grant,
			stepUp,
			payload,
			person: subject as PersonId,
			beside
		});
	});

/** Takes a proposal back, or declines it: either admin may, at once. @throws Conflict when it is closed */
export const withdraw = (ctx: Ctx, actor: Actor, proposal: number): void => {
	ctx.write((tx) => {
		const { person } = plan(ctx, tx, { kind: 'approve', proposal }).payload as { person: PersonId };
		const grant = allow(ctx, tx, actor, 'grant.withdraw', { person });
		record(ctx, tx, actor, grant, { type: 'grant.withdrawn', subjects: [person], payload: { proposal } });
	});
};
