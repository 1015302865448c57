import { afterEach, beforeEach, describe, expect, test, vi } from 'vitest';
import type { Actor } from '$lib/domain/actor';
import { takeStepUp } from '$lib/server/auth/step-up';
import { sessionOf } from '$lib/server/auth/sessions';
import type { Act } from '$lib/server/people/acts';
import { allow } from '$lib/server/people/allow';
import { accountOf } from '$lib/server/people/account';
import { enrol, optionsForLink } from '$lib/server/people/enrolment';
import { addPasskey, optionsForPasskey, receivePasskey } from '$lib/server/people/passkeys';
import { perform, prepare } from '$lib/server/people/perform';
import { recover } from '$lib/server/people/recovery';
import { Authenticator } from '../../support/authenticator';
import { person } from '../../support/people';
import type { TestRegister } from '../../support/register';
import { actorOf, bank, entries, origin, password, signIn, twoAdmins, visitor, type Enrolled } from './bank';

const work = vi.hoisted(() => ({ verifications: 0 }));
vi.mock('@node-rs/argon2', async (original) => {
	const real = await original<typeof import('@node-rs/argon2')>();
	return {
		...real,
		// The cost is looked at elsewhere; here only how often it is paid.
		hash: (text: string) => real.hash(text, { memoryCost: 64, timeCost: 1 }),
		verify: (...sent: Parameters<typeof real.verify>) => {
			work.verifications += 1;
			return real.verify(...sent);
		}
	};
});

let register: TestRegister;
let marta: Enrolled;
let noor: Enrolled;

beforeEach(async () => {
	register = await bank();
	[marta, noor] = await twoAdmins(register);
});
afterEach(() => register.close());

const mail = 'marta.quill@bank.example';
const right = (code = marta.codes[0]!) => ({ mail, password, code });
const recovered = async (): Promise<Actor> => {
	const token = await recover(register.ctx, visitor(), right());
	return actorOf(register, token!);
};

/** Signs with a device as the browser would. */
const sign = async ({ actor, device }: Enrolled, act: Act) => {
	const { options } = await prepare(register.ctx, actor, act);
	const response = device.get({ challenge: options!.challenge, origin });
	return perform(
		register.ctx,
		actor,
		act,
		await takeStepUp(register.ctx, actor, { challenge: '', response })
	);
};

/** Makes a new passkey on a device of its own. */
const create = async (actor: Actor): Promise<{ device: Authenticator; response: string }> => {
	const { challenge, user } = await optionsForPasskey(register.ctx, actor);
	const device = new Authenticator('localhost');
	return { device, response: device.create({ challenge, origin, userHandle: user.id }) };
};

describe('password and code', () => {
	test('open a recovery session that may enrol a passkey and do nothing else', async () => {
		const actor = await recovered();
		const { ctx } = register;
		expect(actor.means).toBe('recovery');
		for (const action of ['register.read', 'people.read', 'person.invite', 'policy.read'] as const)
			expect(() => allow(ctx, ctx.read, actor, action)).toThrow(
				expect.objectContaining({ rule: 'recovery' })
			);
		const { device, response } = await create(actor);
		expect(await receivePasskey(ctx, actor, response)).toBeUndefined();
		expect(await signIn(register, device)).toBeDefined();
	});
	test('a session of a quarter of an hour', async () => {
		const token = (await recover(register.ctx, visitor(), right()))!;
		register.clock.forward(14 * 60_000);
		expect(await sessionOf(register.ctx, token)).not.toBeNull();
		register.clock.forward(60_000);
		expect(await sessionOf(register.ctx, token)).toBeNull();
	});
	test('a code is used once, and its use is entered', async () => {
		await recovered();
		expect(await recover(register.ctx, visitor(), right())).toBeUndefined();
		expect(entries(register).find(({ type }) => type === 'recovery-code.used')?.payload).toEqual({
			person: marta.person,
			left: 9
		});
	});
	test('are read as people write them', async () => {
		const written = marta.codes[1]!.toUpperCase().replaceAll('-', ' ');
		expect(
			await recover(register.ctx, visitor(), { mail: mail.toUpperCase(), password, code: ` ${written} ` })
		).toBeDefined();
	});
	test('end every other session', async () => {
		await recovered();
		await expect(actorOf(register, 'x')).rejects.toThrow();
		const sessions = register.ctx.read.all<{ means: string }>(
			register.ctx.read.q.selectFrom('session').selectAll().where('person', '=', marta.person)
		);
		expect(sessions.map(({ means }) => means)).toEqual(['recovery']);
	});
	test.each([
		['a wrong password', { password: 'eight gulls over the harbour wall' }],
		['a wrong code', { code: 'aaaa-bbbb-cccc-dddd' }],
		['an empty code', { code: '' }],
		['another person’s account', { mail: 'noor.vance@bank.example' }],
		['an unknown account', { mail: 'nobody@bank.example' }]
	])('%s opens nothing', async (_, change) => {
		expect(await recover(register.ctx, visitor(), { ...right(), ...change })).toBeUndefined();
	});
});

test('known and unknown accounts cost the same: one argon2 computation and the same queries', async () => {
	const { ctx } = register;
	const texts: string[] = [];
	const read = {
		...ctx.read,
		all: (query: { compile(): { sql: string } }) => {
			texts.push(query.compile().sql);
			return ctx.read.all(query as never);
		},
		first: (query: { compile(): { sql: string } }) => {
			texts.push(query.compile().sql);
			return ctx.read.first(query as never);
		}
	};
	const watched = { ...ctx, read: read as never };
	const tried = async (
		address: string
	): Promise<{ queries: string[]; computations: number; answer: unknown }> => {
		texts.length = 0;
		work.verifications = 0;
		const answer = await recover(watched, visitor(), { ...right('aaaa-aaaa-aaaa-aaaa'), mail: address });
		return { queries: [...texts], computations: work.verifications, answer };
	};
	const known = await tried(mail);
	const unknown = await tried('nobody@bank.example');
	expect(known.computations).toBe(1);
	expect(unknown).toEqual(known);
});

describe('failures are limited', () => {
	const wrong = { ...right('aaaa-aaaa-aaaa-aaaa') };
	test('an account, known or not, after five codes; passkeys are not touched', async () => {
		for (const address of [mail, 'nobody@bank.example']) {
			for (let n = 0; n < 5; n++)
				expect(await recover(register.ctx, visitor(), { ...wrong, mail: address })).toBeUndefined();
			await expect(recover(register.ctx, visitor(), { ...right(), mail: address })).rejects.toThrow(
				/Too many tries/
			);
		}
		expect(await signIn(register, marta.device)).toBeDefined();
	});
	test('an address', async () => {
		for (let n = 0; n < 50; n++)
			await recover(register.ctx, visitor(), { ...wrong, mail: `${n}@bank.example` });
		await expect(recover(register.ctx, visitor(), right())).rejects.toThrow(/an address/);
		expect(await recover(register.ctx, visitor({ address: '198.51.100.1' }), right())).toBeDefined();
	}, 60_000);
	test('failed sign-ins are entered once a minute, without what was typed', async () => {
		const failures = () => entries(register).filter(({ type }) => type === 'sign-in.failed');
		await recover(register.ctx, visitor(), wrong);
		await recover(register.ctx, visitor(), wrong);
		expect(failures()).toHaveLength(1);
		register.clock.forward(60_000);
		await recover(register.ctx, visitor(), wrong);
		expect(failures()).toHaveLength(2);
		expect(failures()[0]).toMatchObject({
			actor: 'system',
			payload: { way: 'recovery', reason: 'password or code' }
		});
	});
});

test('S8: for 24 hours after a recovery nothing is granted', async () => {
	const actor = await recovered();
	const { device, response } = await create(actor);
	await receivePasskey(register.ctx, actor, response);
	const back = { ...marta, device, actor: await actorOf(register, (await signIn(register, device))!) };
	const ann = person(register).person as Enrolled['person'];
	const act: Act = { kind: 'grant', person: ann, role: 'owner' };
	await expect(sign(back, act)).rejects.toMatchObject({ rule: 'S8' });
	register.clock.forward(24 * 3600_000);
	const later = { ...back, actor: await actorOf(register, (await signIn(register, device))!) };
	await sign(later, act);
	expect(
		entries(register).find(
			({ type, payload }) => type === 'role.granted' && (payload as { person: string }).person === ann
		)
	).toBeDefined();
});

describe('14: a further passkey', () => {
	test('needs a signature with an old one over the new key', async () => {
		const { device, response } = await create(marta.actor);
		const request = (await receivePasskey(register.ctx, marta.actor, response))!;
		expect(await signIn(register, device)).toBeUndefined();
		const signed = await takeStepUp(register.ctx, marta.actor, {
			challenge: request.challenge,
			response: marta.device.get({ challenge: request.options!.challenge, origin })
		});
		addPasskey(register.ctx, marta.actor, signed);
		expect(await signIn(register, device)).toBeDefined();
		const enrolled = entries(register).findLast(({ type }) => type === 'credential.enrolled')!;
		expect(enrolled.auth.stepUp?.credential).toBe(marta.device.id.toString('base64url'));
	});
	test('cannot be signed with the new one', async () => {
		const { device, response } = await create(marta.actor);
		const request = (await receivePasskey(register.ctx, marta.actor, response))!;
		const answer = {
			challenge: request.challenge,
			response: device.get({ challenge: request.options!.challenge, origin })
		};
		await expect(takeStepUp(register.ctx, marta.actor, answer)).rejects.toThrow(/No such passkey/);
	});
	test('cannot be signed with another person’s', async () => {
		const { response } = await create(marta.actor);
		const request = (await receivePasskey(register.ctx, marta.actor, response))!;
		const answer = {
			challenge: '',
			response: noor.device.get({ challenge: request.options!.challenge, origin })
		};
		await expect(takeStepUp(register.ctx, marta.actor, answer)).rejects.toThrow(/another person/);
	});
	test('ends the other sessions', async () => {
		const other = (await signIn(register, marta.device))!;
		const { response } = await create(marta.actor);
		const request = (await receivePasskey(register.ctx, marta.actor, response))!;
		const answer = {
			challenge: '',
			response: marta.device.get({ challenge: request.options!.challenge, origin })
		};
		addPasskey(register.ctx, marta.actor, await takeStepUp(register.ctx, marta.actor, answer));
		expect(await sessionOf(register.ctx, other)).toBeNull();
		expect(accountOf(register.ctx, marta.actor).sessions).toMatchObject([{ current: true }]);
	});
});

describe('revoking a passkey', () => {
	test('the last one stays', async () => {
		const credential = marta.device.id.toString('base64url');
		await expect(sign(marta, { kind: 'revoke-passkey', person: marta.person, credential })).rejects.toThrow(
			/last passkey/
		);
	});
	test('of two one goes, and opens nothing after', async () => {
		const { device, response } = await create(marta.actor);
		const request = (await receivePasskey(register.ctx, marta.actor, response))!;
		const answer = {
			challenge: '',
			response: marta.device.get({ challenge: request.options!.challenge, origin })
		};
		addPasskey(register.ctx, marta.actor, await takeStepUp(register.ctx, marta.actor, answer));
		await sign(marta, {
			kind: 'revoke-passkey',
			person: marta.person,
			credential: device.id.toString('base64url')
		});
		expect(await signIn(register, device)).toBeUndefined();
	});
});

test('two admins start a recovery: a link of 30 minutes that replaces all that was', async () => {
	const third = person(register, { roles: ['admin'] });
	await sign(noor, { kind: 'recover', person: marta.person });
	const proposal = entries(register).at(-1)!.seq;
	const act: Act = { kind: 'approve', proposal, recognised: 'by video' };
	const { challenge } = await prepare(register.ctx, third, act);
	const outcome = perform(
		register.ctx,
		third,
		act,
		await takeStepUp(register.ctx, third, { challenge, response: '' })
	);
	if (outcome.kind !== 'link') throw new Error('No link');
	expect(entries(register).find(({ type }) => type === 'recovery.started')?.payload).toMatchObject({
		recognised: 'by video',
		proposal
	});
	const secret = outcome.url.split('#')[1]!;
	const { challenge: fresh, user } = await optionsForLink(register.ctx, visitor(), {
		secret,
		password: 'nine terns under the lighthouse lamp'
	});
	const device = new Authenticator('localhost');
	const response = device.create({ challenge: fresh, origin, userHandle: user.id });
	await enrol(register.ctx, visitor(), {
		secret,
		password: 'nine terns under the lighthouse lamp',
		response
	});
	expect(await signIn(register, marta.device)).toBeUndefined();
	expect(await signIn(register, device)).toBeDefined();
	register.clock.forward(30 * 60_000);
	await expect(
		optionsForLink(register.ctx, visitor(), { secret, password: 'nine terns under the lighthouse lamp' })
	).rejects.toThrow();
});
