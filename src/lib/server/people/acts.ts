import { roles, scopes, type Actor, type PersonId, type Role, type Scope } from '$lib/domain/actor';
import type { Action } from '$lib/domain/permission-table';
import { Absent, Conflict } from '$lib/domain/faults';
import type { Ctx } from '$lib/server/context';
import type { Handle } from '$lib/server/db/handle';
import type { Schema } from '$lib/server/db/schema';
import type { ToSign } from '$lib/server/auth/step-up';
import { newPersonId } from '$lib/server/auth/secret';
import { newTokenId } from '$lib/server/auth/tokens';
import type { About } from './allow';
import { proposalBySeq } from './people.queries';

/** How a person was recognised before two admins start a recovery. */
export const recognitions = ['in person', 'by video', 'by telephone'] as const;
export type Recognition = (typeof recognitions)[number];

/** Acts upon people that are signed with a fresh passkey assertion. */
export type Act =
	| { readonly kind: 'invite' }
	| { readonly kind: 'renew-invitation'; readonly person: PersonId }
	| { readonly kind: 'grant'; readonly person: PersonId; readonly role: Role }
	| { readonly kind: 're-enable'; readonly person: PersonId }
	| { readonly kind: 'recover'; readonly person: PersonId }
	| { readonly kind: 'approve'; readonly proposal: number; readonly recognised?: Recognition }
	| { readonly kind: 'end-role'; readonly person: PersonId; readonly role: Role }
	| { readonly kind: 'disable'; readonly person: PersonId }
	| { readonly kind: 'end-sessions'; readonly person: PersonId }
	| { readonly kind: 'revoke-passkey'; readonly person: PersonId; readonly credential: string }
	| { readonly kind: 'renew-codes'; readonly person: PersonId }
	| {
			readonly kind: 'create-token';
			readonly person: PersonId;
			readonly scopes: readonly Scope[];
			readonly days: number;
	  }
	| { readonly kind: 'revoke-token'; readonly person: PersonId; readonly token: string };

/** An act with the row of the permission table it needs and the words to be signed. */
export interface Planned extends ToSign {
	readonly action: Action;
	readonly about: About;
}

const day = 24 * 60 * 60_000;
/** A proposal waits this long for the second admin. */
const proposalDays = 3;

const later = (ctx: Ctx, days: number): string => new Date(ctx.now().getTime() + days * day).toISOString();

/** Roles that one admin may grant alone. */
const grantedByOne: readonly Role[] = ['owner'];

type Of<K extends Act['kind']> = Extract<Act, { kind: K }>;
type Given = Readonly<Record<string, unknown>> | undefined;

const person = (act: { readonly person: PersonId }): { about: About; subject: string } => ({
	about: { person: act.person },
	subject: act.person
});

/** What was drawn or reckoned when the page was built is taken from there when the act is done. */
const kept = (given: Given, name: string, fresh: () => string): string => {
	const value = given?.[name];
	return typeof value === 'string' ? value : fresh();
};

const planGrant = (ctx: Ctx, { person: whom, role }: Of<'grant'>, given: Given): Planned => {
	const from = kept(given, 'from', () => ctx.now().toISOString());
	const subject = whom;
	const about = { person: whom, role };
	if (grantedByOne.includes(role))
		return { action: 'role.grant', decision: 'grant', subject, about, payload: { person: whom, role, from } };
	const expires = kept(given, 'expires', () => later(ctx, proposalDays));
	const payload = { act: 'role.grant', person: whom, role, from, expires };
	return { action: 'role.propose', decision: 'propose', subject, about, payload };
};

const planPair = (ctx: Ctx, act: Of<'re-enable' | 'recover'>, given: Given): Planned => {
	const action = act.kind === 'recover' ? 'recovery.start' : 'person.re-enable';
	const expires = kept(given, 'expires', () => later(ctx, proposalDays));
	return {
		action,
		decision: 'propose',
		...person(act),
		payload: { act: action, person: act.person, expires }
	};
};

/** A proposal that still waits. @throws Absent, Conflict */
export const waitingProposal = (ctx: Ctx, handle: Handle, seq: number): Schema['grant_proposal'] => {
	const proposal = handle.first<Schema['grant_proposal']>(proposalBySeq(handle.q, seq));
	if (!proposal) throw new Absent('There is no such proposal.');
	if (proposal.outcome !== null) throw new Conflict(`The proposal was ${proposal.outcome} meanwhile.`);
	if (proposal.expires_at <= ctx.now().toISOString())
		throw new Conflict('The proposal is over: it waited three days for a second admin.');
	return proposal;
};

const planApproval = (ctx: Ctx, handle: Handle, act: Of<'approve'>): Planned => {
	const {
		act: what,
		person: whom,
		role,
		from_at,
		by,
		statement
	} = waitingProposal(ctx, handle, act.proposal);
	const subject = whom;
	// The second signs the first one's statement: its digest is part of what is signed and entered.
	const bound = { person: whom, proposal: act.proposal, statement };
	const about: About = {
		person: whom as PersonId,
		first: by as PersonId,
		...(role === null ? {} : { role: role as Role })
	};
	const plan = { decision: 'approve', subject, about };
	if (what === 'role.grant')
		return { ...plan, action: 'role.approve', payload: { ...bound, role: role!, from: from_at! } };
	if (what === 'person.re-enable') return { ...plan, action: 'person.re-enable', payload: bound };
	const recognised = act.recognised ?? 'in person';
	return { ...plan, action: 'recovery.start', payload: { ...bound, recognised } };
};

const planEnd = (ctx: Ctx, { person: whom, role }: Of<'end-role'>, given: Given): Planned => ({
	action: 'role.end',
	decision: 'end',
	subject: whom,
	about: { person: whom, role },
	payload: { person: whom, role, until: kept(given, 'until', () => ctx.now().toISOString()) }
});

const planInvite = (given: Given): Planned => {
	const whom = kept(given, 'person', newPersonId);
	return { action: 'person.invite', decision: 'invite', subject: whom, about: {}, payload: { person: whom } };
};

const planToken = (ctx: Ctx, act: Of<'create-token'>, given: Given): Planned => {
	const token = kept(given, 'token', newTokenId);
	const expires = kept(given, 'expires', () => later(ctx, act.days));
	const payload = {
		person: act.person,
		token,
		scopes: scopes.filter((one) => act.scopes.includes(one)),
		expires
	};
	return { action: 'token.create', decision: 'create', ...person(act), payload };
};

/**
 * What an act is, word for word, as it will be signed and entered. Building the page and doing the act go through this
 * one function: the second time with the payload of the first, so that ids and times are the signed ones.
 */
export const plan = (ctx: Ctx, handle: Handle, act: Act, given?: Given): Planned => {
	switch (act.kind) {
		case 'invite':
			return planInvite(given);
		case 'renew-invitation':
			return { action: 'person.invite', decision: 'renew', ...person(act), payload: { person: act.person } };
		case 'grant':
			return planGrant(ctx, act, given);
		case 're-enable':
		case 'recover':
			return planPair(ctx, act, given);
		case 'approve':
			return planApproval(ctx, handle, act);
		case 'end-role':
			return planEnd(ctx, act, given);
		case 'disable':
			return {
				action: 'person.disable',
				decision: 'disable',
				...person(act),
				payload: { person: act.person }
			};
		case 'end-sessions':
			return { action: 'session.end-all', decision: 'end', ...person(act), payload: { person: act.person } };
		case 'revoke-passkey': {
			const payload = { person: act.person, credential: act.credential };
			return { action: 'credential.revoke', decision: 'revoke', ...person(act), payload };
		}
		case 'renew-codes':
			return {
				action: 'recovery-codes.renew',
				decision: 'renew',
				...person(act),
				payload: { person: act.person, count: 10 }
			};
		case 'create-token':
			return planToken(ctx, act, given);
		case 'revoke-token': {
			const payload = { person: act.person, token: act.token, reason: 'asked' };
			return { action: 'token.revoke', decision: 'revoke', ...person(act), payload };
		}
	}
};

/** Roles in the order pages show them. */
export const everyRole: readonly Role[] = roles;

/** Whether two admins are needed to grant a role. */
export const needsTwo = (role: Role): boolean => !grantedByOne.includes(role);

/** The one asking, as a person. @throws Absent for the register itself */
export const personIn = (actor: Actor): PersonId => {
	if (actor.person === 'system' || actor.person === 'cli') throw new Absent('This is done by a person.');
	return actor.person;
};
