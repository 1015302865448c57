import type { PersonId } from '$lib/domain/actor';
import { Absent, Conflict, Invalid } from '$lib/domain/faults';
import type { Ctx } from '$lib/server/context';
import type { Handle } from '$lib/server/db/handle';
import type { Schema } from '$lib/server/db/schema';
import { tokensOf } from '$lib/server/auth/auth.queries';
import type { Act } from './acts';
import { checkIdentity, type Identity } from './directory';
import { byMail, openProposals } from './people.queries';
import { rolesOf, stateOf, type State } from './standing';

const mostTokens = 10;
const mostDays = 365;

const inState = (handle: Handle, person: PersonId, allowed: readonly State[], words: string): void => {
	const state = stateOf(handle, person);
	if (!state) throw new Absent('There is no such person.');
	if (!allowed.includes(state)) throw new Conflict(words);
};

const notWaiting = (ctx: Ctx, handle: Handle, act: string, person: PersonId, role?: string): void => {
	const waits = handle
		.all<Schema['grant_proposal']>(openProposals(handle.q, ctx.now().toISOString()))
		.some((one) => one.act === act && one.person === person && one.role === (role ?? null));
	if (waits) throw new Conflict('The same proposal waits for a second admin already.');
};

const checkGrant = (ctx: Ctx, handle: Handle, { person, role }: Extract<Act, { kind: 'grant' }>): void => {
	inState(handle, person, ['invited', 'enrolled'], 'A disabled person is given no role.');
	if (rolesOf(handle, person, ctx.now().toISOString()).includes(role))
		throw new Conflict('The person holds this role already.');
	notWaiting(ctx, handle, 'role.grant', person, role);
};

const checkToken = (
	ctx: Ctx,
	handle: Handle,
	act: Extract<Act, { kind: 'create-token' }>,
	label: string | undefined
): void => {
	const now = ctx.now().toISOString();
	if (act.scopes.length === 0)
		throw new Invalid([{ pointer: '/scopes', message: 'Choose at least one scope.' }]);
	if (!Number.isInteger(act.days) || act.days < 1 || act.days > mostDays)
		throw new Invalid([{ pointer: '/days', message: `Between 1 and ${mostDays} days.` }]);
	if (!label?.trim()) throw new Invalid([{ pointer: '/label', message: 'Say what the token is for.' }]);
	const alive = handle
		.all<Schema['token']>(tokensOf(handle.q, act.person))
		.filter(({ revoked_at, expires_at }) => revoked_at === null && expires_at > now);
	if (alive.length >= mostTokens)
		throw new Conflict(`A person holds at most ${mostTokens} tokens; revoke one first.`);
};

const checkInvitation = (handle: Handle, identity: Identity | undefined): void => {
	const { mail } = checkIdentity(identity ?? { name: '', mail: '', staffNumber: '' });
	if (handle.first(byMail(handle.q, mail)))
		throw new Invalid([{ pointer: '/mail', message: 'Another person has this mail address.' }]);
};

/** Whether the state allows the act now: asked when the page is built and again inside the transaction. */
export const checkAct = (
	ctx: Ctx,
	handle: Handle,
	act: Act,
	beside: { readonly identity?: Identity; readonly label?: string }
): void => {
	switch (act.kind) {
		case 'invite':
			return checkInvitation(handle, beside.identity);
		case 'renew-invitation':
			return inState(handle, act.person, ['invited'], 'The person has enrolled; start a recovery instead.');
		case 'grant':
			return checkGrant(ctx, handle, act);
		case 're-enable':
			inState(handle, act.person, ['disabled'], 'The person is not disabled.');
			return notWaiting(ctx, handle, 'person.re-enable', act.person);
		case 'recover':
			inState(handle, act.person, ['enrolled'], 'Only an enrolled person is recovered.');
			return notWaiting(ctx, handle, 'recovery.start', act.person);
		case 'end-role':
			if (!rolesOf(handle, act.person, ctx.now().toISOString()).includes(act.role))
				throw new Conflict('The person does not hold this role.');
			return;
		case 'disable':
			return inState(handle, act.person, ['invited', 'enrolled'], 'The person is disabled already.');
		case 'create-token':
			return checkToken(ctx, handle, act, beside.label);
		case 'revoke-token': {
			const token = handle
				.all<Schema['token']>(tokensOf(handle.q, act.person))
				.find(({ id }) => id === act.token);
			if (!token) throw new Absent('There is no such token.');
			if (token.revoked_at !== null) throw new Conflict('The token was revoked before.');
			return;
		}
		// Their own states are looked at where they are planned or carried out.
		case 'approve':
		case 'end-sessions':
		case 'revoke-passkey':
		case 'renew-codes':
			return;
	}
};
