import type { Actor, PersonId, Role } from '$lib/domain/actor';
import { Absent } from '$lib/domain/faults';
import type { Ctx } from '$lib/server/context';
import type { Schema } from '$lib/server/db/schema';
import { sessionsOf, tokensOf, unusedCodes } from '$lib/server/auth/auth.queries';
import { closeSession } from '$lib/server/auth/sessions';
import { personIn } from './acts';
import { allow } from './allow';
import { directoryOf } from './directory';
import { shownPasskeys, type Passkey } from './listing';
import { rolesOf } from './standing';

export interface Account {
	readonly person: PersonId;
	readonly name: string;
	readonly mail: string;
	readonly roles: readonly Role[];
	readonly passkeys: readonly Passkey[];
	readonly sessions: readonly {
		readonly label: string;
		readonly means: string;
		readonly openedAt: string;
		readonly seenAt: string;
		readonly agent: string;
		readonly current: boolean;
	}[];
	readonly codesLeft: number;
	readonly tokens: readonly {
		readonly id: string;
		readonly label: string;
		readonly scopes: readonly string[];
		readonly createdAt: string;
		readonly expiresAt: string;
		readonly usedAt: string | null;
		readonly state: 'alive' | 'expired' | 'revoked';
	}[];
}

type TokenRow = Schema['token'] & { label: string | null; used_at: string | null };

/** All that a person can see of their own account. */
export const accountOf = (ctx: Ctx, actor: Actor): Account => {
	const person = personIn(actor);
	const { read } = ctx;
	const now = ctx.now().toISOString();
	allow(ctx, read, actor, 'account.read', { person });
	const row = directoryOf(read, person);
	return {
		person,
		name: row?.name ?? person,
		mail: row?.mail ?? '',
		roles: rolesOf(read, person, now),
		passkeys: shownPasskeys(read, person),
		sessions: read.all<Schema['session']>(sessionsOf(read.q, person)).map((one) => ({
			label: one.label,
			means: one.means,
			openedAt: one.created_at,
			seenAt: one.seen_at,
			agent: one.agent,
			current: one.hash === actor.session
		})),
		codesLeft: read.all(unusedCodes(read.q, person)).length,
		tokens: read.all<TokenRow>(tokensOf(read.q, person)).map((one) => ({
			id: one.id,
			label: one.label ?? '',
			scopes: JSON.parse(one.scopes) as string[],
			createdAt: one.created_at,
			expiresAt: one.expires_at,
			usedAt: one.used_at,
			state: one.revoked_at !== null ? 'revoked' : one.expires_at <= now ? 'expired' : 'alive'
		}))
	};
};

/** Ends one of one's own sessions by its label. @throws Absent */
export const endOwnSession = (ctx: Ctx, actor: Actor, label: string): void => {
	const person = personIn(actor);
	ctx.write((tx) => {
		allow(ctx, tx, actor, 'session.end', { person });
		const row = tx.all<Schema['session']>(sessionsOf(tx.q, person)).find((one) => one.label === label);
		if (!row) throw new Absent('There is no such session.');
		closeSession(ctx, tx, row, actor, 'ended');
	});
};
