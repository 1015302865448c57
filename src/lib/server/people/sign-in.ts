import type { Actor, PersonId, Role } from '$lib/domain/actor';
import { system } from '$lib/domain/actor';
import { Absent } from '$lib/domain/faults';
import type { Ctx } from '$lib/server/context';
import { BackupChanged, verifyAssertion } from '$lib/server/auth/assertion';
import { noteUse } from '$lib/server/auth/credentials';
import { AuthFault } from '$lib/server/auth/fault';
import { limitsOf, network } from '$lib/server/auth/limits';
import { endSession, openSession, type Limits } from '$lib/server/auth/sessions';
import { record } from '$lib/server/log/record';
import { recordFailure } from './refusals';
import { listSeats, seatsOffered } from './seats';
import { rolesOf, stateOf } from './standing';

/** Where a request comes from; none of it is stored but the browser's own name for the list of sessions. */
export interface Visitor {
	/** Digest of the door cookie that binds a challenge to this browser. */
	readonly holder: string;
	readonly address: string;
	readonly agent: string;
	readonly request: string;
}

/** The one sentence of every failed sign-in. */
export const notSignedIn = 'You were not signed in. Try again, or use another way.';

/** Minutes without use, and in all: admins shorter (NIST SP 800-63B-4, section 2.2.3, asks at most 60 and 1,440). */
export const limitsFor = (roles: readonly Role[]): Limits =>
	roles.includes('admin') ? { idle: 15, absolute: 8 * 60 } : { idle: 30, absolute: 12 * 60 };

const enterBackupChange = (ctx: Ctx, request: string, fault: BackupChanged): void => {
	const { person, credential, received } = fault;
	ctx.write((tx) =>
		record(
			ctx,
			tx,
			system(request),
			{ rule: 'door' },
			{
				type: 'credential.backup-changed',
				subjects: [person],
				payload: { person, credential, enrolled: !received, received }
			}
		)
	);
};

/** What failed is counted and entered; the visitor reads one sentence. */
const failed = async (ctx: Ctx, visitor: Visitor, fault: AuthFault): Promise<void> => {
	await limitsOf(ctx).count('passkey failures an address', network(visitor.address));
	if (fault instanceof BackupChanged) enterBackupChange(ctx, visitor.request, fault);
	const person = fault instanceof BackupChanged ? fault.person : undefined;
	recordFailure(ctx, visitor.request, 'passkey', fault.reason, person);
};

/**
 * Signs in by passkey: a new session, whose token goes into the cookie and nowhere else.
 * @returns the token, or undefined when the sign-in failed for whatever reason
 * @throws TooMany
 */
export const signInWithPasskey = async (
	ctx: Ctx,
	visitor: Visitor,
	response: string
): Promise<string | undefined> => {
	await limitsOf(ctx).check('passkey failures an address', network(visitor.address));
	try {
		const assertion = await verifyAssertion(ctx, response, 'sign-in', visitor.holder);
		const { person, credential } = assertion;
		if (stateOf(ctx.read, person) !== 'enrolled')
			throw new AuthFault('disabled', 'The person is not active.');
		const { request, agent } = visitor;
		const actor: Actor = { person, means: 'passkey', roles: [], request };
		ctx.write((tx) => noteUse(ctx, tx, actor, assertion));
		const limits = limitsFor(rolesOf(ctx.read, person, ctx.now().toISOString()));
		return await openSession(ctx, person, { means: 'passkey', limits, agent, request, credential });
	} catch (fault) {
		if (!(fault instanceof AuthFault)) throw fault;
		await failed(ctx, visitor, fault);
		return undefined;
	}
};

/** Takes a demo seat. @throws Absent where there is none */
export const takeSeat = async (ctx: Ctx, visitor: Visitor, person: PersonId): Promise<string> => {
	const seat = seatsOffered(ctx) ? listSeats(ctx).find((one) => one.person === person) : undefined;
	if (!seat) throw new Absent('There is no such seat.');
	const { agent, request } = visitor;
	return openSession(ctx, person, { means: 'seat', limits: limitsFor(seat.roles), agent, request });
};

/** Ends the session of the request. */
export const signOut = (ctx: Ctx, actor: Actor): void => {
	if (actor.session !== undefined) endSession(ctx, actor.session, actor, 'signed out');
};
