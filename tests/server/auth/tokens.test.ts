import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { takeStepUp } from '$lib/server/auth/step-up';
import { presentedToken, tokenIdIn, tokenWithin } from '$lib/server/auth/tokens';
import { Conflict, Invalid, Refused } from '$lib/domain/faults';
import type { Actor, Scope } from '$lib/domain/actor';
import type { Act } from '$lib/server/people/acts';
import { allow } from '$lib/server/people/allow';
import { actorOfToken } from '$lib/server/people/identify';
import { perform, prepare } from '$lib/server/people/perform';
import { idOf, person } from '../../support/people';
import type { TestRegister } from '../../support/register';
import { bank, entries } from '../people/bank';

let register: TestRegister;
let owner: Actor;

beforeEach(async () => {
	register = await bank();
	owner = person(register, { roles: ['owner'] });
});
afterEach(() => register.close());

const beside = { label: 'nightly upload' };
const sign = async (actor: Actor, act: Act) => {
	const { challenge } = await prepare(register.ctx, actor, act, beside);
	return perform(
		register.ctx,
		actor,
		act,
		await takeStepUp(register.ctx, actor, { challenge, response: '' }),
		beside
	);
};
const create = async (scopes: readonly Scope[] = ['read'], days = 90): Promise<string> => {
	const outcome = await sign(owner, { kind: 'create-token', person: idOf(owner), scopes, days });
	if (outcome.kind !== 'token') throw new Error('No token');
	return outcome.token;
};
const bearer = (token: string) => actorOfToken(register.ctx, `Bearer ${token}`, 'test');

test('has its form, is stored as a digest, and never stands in the log', async () => {
	const token = await create();
	expect(token).toMatch(/^kbt_[a-z2-7]{10}_[A-Za-z0-9_-]{43}_[a-z2-7]{6}$/);
	const secret = token.split('_').slice(2, -1).join('_').slice(0, 43);
	const { read } = register.ctx;
	expect(JSON.stringify(read.all(read.q.selectFrom('token_secret').selectAll()))).not.toContain(secret);
	expect(JSON.stringify(entries(register))).not.toContain(secret);
});

test('acts for its owner within its scopes, and dies with them', async () => {
	const token = await create(['read', 'data']);
	expect(bearer(token)).toMatchObject({
		person: owner.person,
		means: 'token',
		scopes: ['read', 'data'],
		roles: ['owner']
	});
	const { ctx } = register;
	expect(allow(ctx, ctx.read, bearer(token)!, 'register.read').rule).toBe('register.read');
	expect(() => allow(ctx, ctx.read, bearer(token)!, 'model.register')).toThrow(
		expect.objectContaining({ rule: 'scope' })
	);
	expect(() => allow(ctx, ctx.read, bearer(token)!, 'people.read')).toThrow(
		expect.objectContaining({ rule: 'S9' })
	);
	register.clock.forward(90 * 24 * 3600_000);
	expect(bearer(token)).toBeNull();
});

test('revoked, it opens nothing', async () => {
	const token = await create();
	await sign(owner, { kind: 'revoke-token', person: idOf(owner), token: tokenIdIn(token)! });
	expect(bearer(token)).toBeNull();
	await expect(
		sign(owner, { kind: 'revoke-token', person: idOf(owner), token: tokenIdIn(token)! })
	).rejects.toThrow(Conflict);
});

test('dies when its owner is disabled, which is entered', async () => {
	const token = await create();
	const admin = person(register, { roles: ['admin'] });
	await sign(admin, { kind: 'disable', person: idOf(owner) });
	expect(bearer(token)).toBeNull();
	expect(entries(register).at(-1)).toMatchObject({ type: 'token.revoked', payload: { reason: 'disabled' } });
});

describe('is not made', () => {
	test('for longer than a year, without a scope, without a label', async () => {
		await expect(create(['read'], 366)).rejects.toThrow(Invalid);
		await expect(create(['read'], 0)).rejects.toThrow(Invalid);
		await expect(create([])).rejects.toThrow(Invalid);
		const act: Act = { kind: 'create-token', person: idOf(owner), scopes: ['read'], days: 1 };
		await expect(prepare(register.ctx, owner, act, { label: ' ' })).rejects.toThrow(Invalid);
	});
	test('for somebody else', async () => {
		const other = person(register, { roles: ['owner'] });
		await expect(
			sign(other, { kind: 'create-token', person: idOf(owner), scopes: ['read'], days: 1 })
		).rejects.toThrow(Refused);
	});
	test('beyond ten alive', async () => {
		for (let n = 0; n < 10; n++) await create();
		await expect(create()).rejects.toThrow(Conflict);
	});
	test('by a token', async () => {
		const token = bearer(await create(['read', 'write', 'data', 'run', 'submit-draft', 'export']))!;
		const act: Act = { kind: 'create-token', person: idOf(owner), scopes: ['read'], days: 1 };
		await expect(prepare(register.ctx, token, act, beside)).rejects.toMatchObject({ rule: 'S9' });
	});
});

test('malformed tokens open nothing, and are told by their checksum without a look at the register', async () => {
	const token = await create();
	const bent = token.replace(/_(.)/g, (_, c: string) => `_${c === 'a' ? 'b' : 'a'}`);
	for (const bad of ['', 'kbt_', bent, token.slice(0, -1), `${token}a`, token.toUpperCase(), ` ${token}`]) {
		expect(tokenIdIn(bad)).toBeUndefined();
		expect(presentedToken(register.ctx, bad)).toBeUndefined();
	}
	expect(tokenWithin(`/models?key=${token}&x=1`)).toBe(token);
	expect(tokenWithin(`/models?key=${bent}`)).toBeUndefined();
});

test('its use is noted to the hour', async () => {
	const token = await create();
	bearer(token);
	const { read } = register.ctx;
	const row = read.first(read.q.selectFrom('token_secret').select('used_at'));
	expect(row?.used_at).toBe('2026-03-02T09:00:00.000Z');
});
