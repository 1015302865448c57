import type { Actor, PersonId } from '$lib/domain/actor';
import type { Ctx } from '$lib/server/context';
import type { Schema } from '$lib/server/db/schema';
import { passwordOf, unusedCodes } from '$lib/server/auth/auth.queries';
import { AuthFault } from '$lib/server/auth/fault';
import { limitsOf, network } from '$lib/server/auth/limits';
import { passwordMatches } from '$lib/server/auth/passwords';
import { codeMatches, takeCode } from '$lib/server/auth/recovery-codes';
import { closeSessions, openSession } from '$lib/server/auth/sessions';
import { record } from '$lib/server/log/record';
import { byMail } from './people.queries';
import { recordFailure } from './refusals';
import type { Visitor } from './sign-in';
import { stateOf } from './standing';

/** What is typed to recover: all three together, judged together. */
export interface Recovering {
	readonly mail: string;
	readonly password: string;
	readonly code: string;
}

/** A quarter of an hour, however it is used. */
const limits = { idle: 15, absolute: 15 } as const;

/** Stands in the queries for an account that does not exist, so that equal work is done. */
const nobody: PersonId = 'p_';

interface Match {
	readonly person: PersonId;
	readonly hash: string;
}

/** Compares password and code; one argon2 computation and the same queries whether the account exists or not. */
const match = async (ctx: Ctx, { mail, password, code }: Recovering): Promise<Match | undefined> => {
	const { read } = ctx;
	const account = read.first<Schema['person']>(byMail(read.q, mail.trim()));
	const person = (account?.id ?? nobody) as PersonId;
	const stored = read.first<Schema['password']>(passwordOf(read.q, person));
	const codes = read.all<Schema['recovery_code']>(unusedCodes(read.q, person));
	const active = stateOf(read, person) === 'enrolled';
	const right = await passwordMatches(stored?.hash, password);
	const hash = codeMatches(codes, code);
	return right && active && hash !== undefined ? { person, hash } : undefined;
};

const enterUse = (ctx: Ctx, { person, hash }: Match, request: string): void => {
	const actor: Actor = { person, means: 'recovery', roles: [], request };
	ctx.write((tx) => {
		const left = takeCode(ctx, tx, person, hash);
		if (left === undefined) throw new AuthFault('password or code', 'The code was used.');
		record(
			ctx,
			tx,
			actor,
			{ rule: 'recovery' },
			{
				type: 'recovery-code.used',
				subjects: [person],
				payload: { person, left }
			}
		);
		closeSessions(ctx, tx, person, actor, 'credential changed');
	});
};

const counted = async (ctx: Ctx, account: string, address: string, how: 'check' | 'count'): Promise<void> => {
	const limiter = limitsOf(ctx);
	await limiter[how]('recovery failures an address', address);
	await limiter[how]('recovery failures an account', account);
	await limiter[how]('recovery codes an account', account);
};

/**
 * Password and recovery code together open a recovery session: a quarter of an hour in which a passkey can be enrolled,
 * and nothing else. A password alone opens nothing.
 * @returns the session's token, or undefined whatever was wrong
 * @throws TooMany
 */
export const recover = async (ctx: Ctx, visitor: Visitor, typed: Recovering): Promise<string | undefined> => {
	// Counted by what was typed, so that unknown accounts are limited like known ones.
	const account = typed.mail.trim().toLowerCase().slice(0, 256);
	const address = network(visitor.address);
	await counted(ctx, account, address, 'check');
	try {
		const found = await match(ctx, typed);
		if (!found) throw new AuthFault('password or code', 'Not matched.');
		enterUse(ctx, found, visitor.request);
		const { agent, request } = visitor;
		return await openSession(ctx, found.person, { means: 'recovery', limits, agent, request });
	} catch (fault) {
		if (!(fault instanceof AuthFault)) throw fault;
		await counted(ctx, account, address, 'count');
		recordFailure(ctx, visitor.request, 'recovery', fault.reason);
		return undefined;
	}
};
