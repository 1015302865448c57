import { Lucia, TimeSpan, type Adapter, type DatabaseSession, type DatabaseUser } from 'lucia';
import type { Actor, Means, PersonId } from '$lib/domain/actor';
import { system } from '$lib/domain/actor';
import type { Closing } from '$lib/domain/events/people';
import type { Ctx } from '$lib/server/context';
import type { Tx } from '$lib/server/db/handle';
import type { Schema } from '$lib/server/db/schema';
import { record } from '$lib/server/log/record';
import { everySession, sessionByHash, sessionsOf } from './auth.queries';
import { newSessionLabel, randomText, secretHash } from './secret';

/** How long a session lives, in minutes: without use, and in all. */
export interface Limits {
	readonly idle: number;
	readonly absolute: number;
}

interface Attributes {
	readonly means: Means;
	readonly limits: Limits;
	readonly agent: string;
	readonly request: string;
	readonly credential?: string;
}

declare module 'lucia' {
	interface Register {
		Lucia: Lucia<{ label: string; means: Means }>;
		UserId: PersonId;
		DatabaseSessionAttributes: Attributes & { readonly label: string };
	}
}

type Row = Schema['session'];

/** A person holds at most this many sessions; the oldest ends. */
const mostSessions = 5;

/** Ends a session and enters it, inside a transaction. */
export const closeSession = (ctx: Ctx, tx: Tx, row: Row, actor: Actor, reason: Closing): void => {
	tx.remove('session', { hash: row.hash });
	record(
		ctx,
		tx,
		actor,
		{ rule: 'session.end' },
		{
			type: 'session.closed',
			subjects: [row.person],
			payload: { person: row.person, session: row.label, reason }
		}
	);
};

/** Which limit a session has passed at an instant, if any. */
const overBy = (row: Row, now: Date): 'idle' | 'absolute' | undefined => {
	const minutes = (since: string): number => (now.getTime() - Date.parse(since)) / 60_000;
	if (minutes(row.created_at) >= row.absolute) return 'absolute';
	return minutes(row.seen_at) >= row.idle ? 'idle' : undefined;
};

/** lucia's clock is the system's; ours is the register's. What the adapter hands out is always far from expiry. */
const farAhead = (): Date => new Date(Date.now() + 400 * 24 * 3600_000);

const asLucia = (row: Row, id: string): DatabaseSession => ({
	id,
	userId: row.person as PersonId,
	expiresAt: farAhead(),
	attributes: {
		label: row.label,
		means: row.means as Means,
		limits: { idle: row.idle, absolute: row.absolute },
		agent: row.agent,
		request: ''
	}
});

const insert = (ctx: Ctx, { id, userId: person, attributes }: DatabaseSession): void => {
	const { means, limits, agent, request, label, credential } = attributes;
	const at = ctx.now().toISOString();
	ctx.write((tx) => {
		const rows = tx.all<Row>(sessionsOf(tx.q, person));
		for (const row of rows.slice(0, Math.max(0, rows.length + 1 - mostSessions)))
			closeSession(ctx, tx, row, system(request), 'too many');
		tx.insert('session', {
			hash: secretHash(id),
			label,
			person,
			means,
			...limits,
			created_at: at,
			seen_at: at,
			agent
		});
		const actor: Actor = { person, means, roles: [], request };
		record(
			ctx,
			tx,
			actor,
			{ rule: 'session.open' },
			{
				type: 'session.opened',
				subjects: [person],
				payload: { person, session: label, ...(credential ? { credential } : {}) }
			}
		);
	});
};

/** Use is noted once a minute: a page of twenty requests writes one row. */
const touchAfter = 60_000;

const find = (ctx: Ctx, token: string): Row | undefined => {
	const hash = secretHash(token);
	const row = ctx.read.first<Row>(sessionByHash(ctx.read.q, hash));
	if (!row) return undefined;
	const now = ctx.now();
	const over = overBy(row, now);
	if (over) {
		ctx.write((tx) => {
			// Another request may have closed it since it was read.
			if (tx.first(sessionByHash(tx.q, hash))) closeSession(ctx, tx, row, system('session'), over);
		});
		return undefined;
	}
	if (now.getTime() - Date.parse(row.seen_at) >= touchAfter)
		ctx.write(
			(tx) =>
				void tx.run(tx.q.updateTable('session').set({ seen_at: now.toISOString() }).where('hash', '=', hash))
		);
	return row;
};

/** lucia's storage: only digests of tokens are kept, and the limits are judged here by the register's clock. */
const adapter = (ctx: Ctx): Adapter => ({
	getSessionAndUser: async (token): Promise<[DatabaseSession | null, DatabaseUser | null]> => {
		const row = find(ctx, token);
		return row ? [asLucia(row, token), { id: row.person as PersonId, attributes: {} }] : [null, null];
	},
	getUserSessions: async (person) =>
		ctx.read.all<Row>(sessionsOf(ctx.read.q, person)).map((row) => asLucia(row, row.hash)),
	setSession: async (session) => insert(ctx, session),
	// The idle limit moves by use, above; lucia never sees a session near its end.
	updateSessionExpiration: async () => undefined,
	deleteSession: async (token) => endSession(ctx, secretHash(token), system('session'), 'ended'),
	deleteUserSessions: async (person) =>
		ctx.write((tx) => closeSessions(ctx, tx, person, system('session'), 'ended')),
	deleteExpiredSessions: async () => sweepSessions(ctx)
});

const made = new WeakMap<Ctx, Lucia<{ label: string; means: Means }>>();

const luciaOf = (ctx: Ctx): Lucia<{ label: string; means: Means }> => {
	let lucia = made.get(ctx);
	if (!lucia) {
		lucia = new Lucia<{ label: string; means: Means }>(adapter(ctx), {
			sessionExpiresIn: new TimeSpan(1, 'd'),
			getSessionAttributes: ({ label, means }) => ({ label, means })
		});
		made.set(ctx, lucia);
	}
	return lucia;
};

/** A session as a request presents it. */
export interface Session {
	readonly person: PersonId;
	readonly means: Means;
	/** Digest of the token. */
	readonly hash: string;
}

/** Opens a session with a new token of 160 bits and enters it; returns the token, which is stored nowhere. */
export const openSession = async (ctx: Ctx, person: PersonId, attributes: Attributes): Promise<string> => {
	const token = randomText(20);
	await luciaOf(ctx).createSession(person, { ...attributes, label: newSessionLabel() }, { sessionId: token });
	return token;
};

/** The session of a token, or null when it is unknown or over. */
export const sessionOf = async (ctx: Ctx, token: string): Promise<Session | null> => {
	const { session } = await luciaOf(ctx).validateSession(token);
	return session && { person: session.userId, means: session.means, hash: secretHash(token) };
};

/** Ends one session, if it still lives. */
export const endSession = (ctx: Ctx, hash: string, actor: Actor, reason: Closing): void => {
	ctx.write((tx) => {
		const row = tx.first<Row>(sessionByHash(tx.q, hash));
		if (row) closeSession(ctx, tx, row, actor, reason);
	});
};

/** Ends a person's sessions inside a transaction, but for the one kept. */
export const closeSessions = (
	ctx: Ctx,
	tx: Tx,
	person: PersonId,
	actor: Actor,
	reason: Closing,
	keep?: string
): void => {
	for (const row of tx.all<Row>(sessionsOf(tx.q, person)))
		if (row.hash !== keep) closeSession(ctx, tx, row, actor, reason);
};

/** Ends every session that has passed a limit; for the ticker. */
export const sweepSessions = (ctx: Ctx): void => {
	const now = ctx.now();
	const over = ctx.read.all<Row>(everySession(ctx.read.q)).filter((row) => overBy(row, now));
	if (over.length === 0) return;
	ctx.write((tx) => {
		for (const row of over)
			if (tx.first(sessionByHash(tx.q, row.hash)))
				closeSession(ctx, tx, row, system('ticker'), overBy(row, now)!);
	});
};
