import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import type { PersonId } from '$lib/domain/actor';
import { Absent } from '$lib/domain/faults';
import type { Ctx } from '$lib/server/context';
import { sessionCookie } from '$lib/server/auth/cookies';
import { openSession } from '$lib/server/auth/sessions';
import { takeStepUp } from '$lib/server/auth/step-up';
import type { Act } from '$lib/server/people/acts';
import { identify } from '$lib/server/people/identify';
import { perform, prepare } from '$lib/server/people/perform';
import { listSeats, seedSeat } from '$lib/server/people/seats';
import { limitsFor, takeSeat } from '$lib/server/people/sign-in';
import { idOf, person } from '../../support/people';
import type { TestRegister } from '../../support/register';
import { bank, entries, visitor } from './bank';

let register: TestRegister;

beforeEach(async () => {
	register = await bank();
});
afterEach(() => register.close());

const asked = (
	ctx: Ctx,
	{ cookie, authorization, path = '/' }: { cookie?: string; authorization?: string; path?: string }
) => ({
	cookies: { get: (name: string) => (name === sessionCookie(ctx.config).name ? cookie : undefined) } as never,
	request: new Request(`http://localhost:3000${path}`, authorization ? { headers: { authorization } } : {}),
	locals: { requestId: 'r1' } as never,
	url: new URL(`http://localhost:3000${path}`)
});
const open = (who: PersonId, means: 'passkey' | 'recovery' = 'passkey') =>
	openSession(register.ctx, who, { means, limits: limitsFor([]), agent: '', request: 'test' });
const act = async (admin: ReturnType<typeof person>, what: Act) => {
	const { challenge } = await prepare(register.ctx, admin, what, { label: 'x' });
	return perform(
		register.ctx,
		admin,
		what,
		await takeStepUp(register.ctx, admin, { challenge, response: '' }),
		{ label: 'x' }
	);
};

test('a session names its person with the roles of the moment', async () => {
	const { ctx } = register;
	const ann = idOf(person(register, { roles: ['owner'] }));
	const cookie = await open(ann);
	expect(await identify(ctx, asked(ctx, { cookie }))).toMatchObject({
		person: ann,
		means: 'passkey',
		roles: ['owner'],
		request: 'r1'
	});
	expect(await identify(ctx, asked(ctx, {}))).toBeNull();
	expect(await identify(ctx, asked(ctx, { cookie: 'a'.repeat(32) }))).toBeNull();
});

test('a recovery session holds no role', async () => {
	const { ctx } = register;
	const cookie = await open(idOf(person(register, { roles: ['owner'] })), 'recovery');
	expect(await identify(ctx, asked(ctx, { cookie }))).toMatchObject({ means: 'recovery', roles: [] });
});

test('a disabled person is nobody', async () => {
	const { ctx } = register;
	const [first, ann] = [person(register, { roles: ['admin'] }), idOf(person(register, { roles: ['owner'] }))];
	await act(first, { kind: 'disable', person: ann });
	const cookie = await open(ann);
	expect(await identify(ctx, asked(ctx, { cookie }))).toBeNull();
	expect(entries(register).at(-1)).toMatchObject({ type: 'session.closed', payload: { reason: 'disabled' } });
});

test('a token in an address is revoked at once', async () => {
	const { ctx } = register;
	const ann = person(register, { roles: ['owner'] });
	const made = await act(ann, { kind: 'create-token', person: idOf(ann), scopes: ['read'], days: 9 });
	if (made.kind !== 'token') throw new Error('No token');
	const authorization = `Bearer ${made.token}`;
	expect(await identify(ctx, asked(ctx, { authorization }))).toMatchObject({ means: 'token' });
	expect(await identify(ctx, asked(ctx, { path: `/models?token=${made.token}` }))).toBeNull();
	expect(entries(register).at(-1)).toMatchObject({ type: 'token.revoked', payload: { reason: 'disclosed' } });
	expect(await identify(ctx, asked(ctx, { authorization }))).toBeNull();
});

describe('seats', () => {
	const demo = (ctx: Ctx, change: Partial<Ctx['config']> = {}): Ctx => ({
		...ctx,
		config: { ...ctx.config, demo: true, ...change }
	});
	const elsewhere = { origin: 'https://keelbook.bank.example' };

	test('are taken with one click in a demo register on this machine', async () => {
		const ctx = demo(register.ctx);
		const ann = seedSeat(ctx, { name: 'Ada Quint', roles: ['owner'] });
		expect(listSeats(ctx)).toEqual([{ person: ann, name: 'Ada Quint', roles: ['owner'] }]);
		const cookie = await takeSeat(ctx, visitor(), ann);
		expect(await identify(ctx, asked(ctx, { cookie }))).toMatchObject({ person: ann, means: 'seat' });
		expect(entries(register).at(-1)).toMatchObject({ type: 'session.opened', auth: { means: 'seat' } });
	});
	test.each([
		['a register that is no demo', { demo: false }],
		['an origin that is not this machine', elsewhere]
	])('do not exist in %s', async (_, change) => {
		const ann = seedSeat(demo(register.ctx), { name: 'Ada Quint', roles: ['owner'] });
		const ctx = demo(register.ctx, change);
		expect(() => seedSeat(ctx, { name: 'Bo Marl', roles: [] })).toThrow(Absent);
		expect(listSeats(ctx)).toEqual([]);
		await expect(takeSeat(ctx, visitor(), ann)).rejects.toThrow(Absent);
	});
	test('a session taken before ends when seats are no longer offered', async () => {
		const ann = seedSeat(demo(register.ctx), { name: 'Ada Quint', roles: ['owner'] });
		const cookie = await takeSeat(demo(register.ctx), visitor(), ann);
		expect(await identify(register.ctx, asked(register.ctx, { cookie }))).toBeNull();
	});
	test('of people who are none cannot be taken', async () => {
		const ctx = demo(register.ctx);
		await expect(takeSeat(ctx, visitor(), 'p_aaaaaaaaaaaaaaaaaaaaaaaaaa')).rejects.toThrow(Absent);
	});
	test('their key is named in the log for what it is', () => {
		seedSeat(demo(register.ctx), { name: 'Ada Quint', roles: ['owner'] });
		const enrolled = entries(register).find(({ type }) => type === 'credential.enrolled');
		expect(enrolled?.payload).toMatchObject({ kind: 'seat' });
	});
});

test('ten failed signatures in ten minutes, then none is looked at', async () => {
	const { ctx } = register;
	const [admin, ann] = [person(register, { roles: ['admin'] }), idOf(person(register))];
	for (let n = 0; n < 10; n++)
		await expect(takeStepUp(ctx, admin, { challenge: 'AAAA', response: '' })).rejects.toThrow(/challenge/);
	const { challenge } = await prepare(ctx, admin, { kind: 'grant', person: ann, role: 'owner' });
	await expect(takeStepUp(ctx, admin, { challenge, response: '' })).rejects.toThrow(/Too many tries/);
});
