import { afterEach, beforeEach, expect, test } from 'vitest';
import { sessionCookie } from '$lib/server/auth/cookies';
import { secretHash } from '$lib/server/auth/secret';
import { openSession, sessionOf, sweepSessions } from '$lib/server/auth/sessions';
import { limitsFor, signOut } from '$lib/server/people/sign-in';
import { idOf, person } from '../../support/people';
import type { TestRegister } from '../../support/register';
import { bank, entries } from '../people/bank';

const minute = 60_000;
let register: TestRegister;

beforeEach(async () => {
	register = await bank();
});
afterEach(() => register.close());

const open = (roles: readonly ('owner' | 'admin')[]) => {
	const actor = person(register, { roles });
	const limits = limitsFor(actor.roles);
	return openSession(register.ctx, idOf(actor), {
		means: 'passkey',
		limits,
		agent: 'a browser',
		request: 'test'
	});
};
const reasons = () =>
	entries(register)
		.filter(({ type }) => type === 'session.closed')
		.map(({ payload }) => (payload as { reason: string }).reason);

test.each([
	[['owner'] as const, 30],
	[['admin'] as const, 15]
])('%s: ends after %i minutes without use', async (roles, idle) => {
	const token = await open(roles);
	register.clock.forward((idle - 1) * minute);
	expect(await sessionOf(register.ctx, token)).not.toBeNull();
	register.clock.forward((idle - 1) * minute);
	expect(await sessionOf(register.ctx, token)).not.toBeNull();
	register.clock.forward(idle * minute);
	expect(await sessionOf(register.ctx, token)).toBeNull();
	expect(reasons()).toEqual(['idle']);
});

test.each([
	[['owner'] as const, 12, 25],
	[['admin'] as const, 8, 10]
])('%s: ends after %i hours however it is used', async (roles, hours, step) => {
	const token = await open(roles);
	const uses = (hours * 60) / step;
	for (let n = 1; n < uses; n++) {
		register.clock.forward(step * minute);
		expect(await sessionOf(register.ctx, token)).not.toBeNull();
	}
	register.clock.forward(step * minute);
	expect(await sessionOf(register.ctx, token)).toBeNull();
	expect(reasons()).toEqual(['absolute']);
});

test('a person holds five; the sixth ends the oldest', async () => {
	const id = idOf(person(register, { roles: ['owner'] }));
	const tokens: string[] = [];
	for (let n = 0; n < 6; n++) {
		const limits = limitsFor(['owner']);
		tokens.push(
			await openSession(register.ctx, id, { means: 'passkey', limits, agent: '', request: 'test' })
		);
		register.clock.forward(1000);
	}
	const alive = await Promise.all(tokens.map((token) => sessionOf(register.ctx, token)));
	expect(alive.map((session) => session !== null)).toEqual([false, true, true, true, true, true]);
	expect(reasons()).toEqual(['too many']);
});

test('only the digest of the token is stored, and an unknown token opens nothing', async () => {
	const token = await open(['owner']);
	const rows = JSON.stringify(register.ctx.read.all(register.ctx.read.q.selectFrom('session').selectAll()));
	expect(rows).not.toContain(token);
	expect(rows).toContain(secretHash(token));
	expect(await sessionOf(register.ctx, secretHash(token))).toBeNull();
	expect(await sessionOf(register.ctx, '')).toBeNull();
});

test('signing out ends the session and is entered once', async () => {
	const token = await open(['owner']);
	const session = (await sessionOf(register.ctx, token))!;
	const actor = { ...session, roles: [], session: session.hash, request: 'test' };
	signOut(register.ctx, actor);
	signOut(register.ctx, actor);
	expect(await sessionOf(register.ctx, token)).toBeNull();
	expect(reasons()).toEqual(['signed out']);
});

test('the sweep ends what nobody uses', async () => {
	await open(['owner']);
	await open(['admin']);
	register.clock.forward(20 * minute);
	sweepSessions(register.ctx);
	expect(reasons()).toEqual(['idle']);
	register.clock.forward(20 * minute);
	sweepSessions(register.ctx);
	expect(reasons()).toEqual(['idle', 'idle']);
});

test('the cookie is bound to the host over https, and has another name on this machine', () => {
	const { config } = register.ctx;
	const bound = sessionCookie({ ...config, origin: 'https://keelbook.bank.example' });
	expect(bound).toEqual({
		name: '__Host-keelbook',
		options: { path: '/', httpOnly: true, secure: true, sameSite: 'lax' }
	});
	expect(sessionCookie(config)).toMatchObject({ name: 'keelbook-local', options: { secure: false } });
});
