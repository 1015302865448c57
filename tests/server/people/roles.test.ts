import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { digestOf } from '$lib/chain/digest';
import { canonical } from '$lib/chain/canonical';
import { verifyStepUp } from '$lib/chain/step-up';
import type { Actor, PersonId, Role } from '$lib/domain/actor';
import type { StepUp } from '$lib/domain/entry';
import { Conflict, Refused } from '$lib/domain/faults';
import { takeStepUp } from '$lib/server/auth/step-up';
import { openSession, sessionOf } from '$lib/server/auth/sessions';
import type { Act } from '$lib/server/people/acts';
import { waitingProposals } from '$lib/server/people/listing';
import { perform, prepare, withdraw, type Beside, type Outcome } from '$lib/server/people/perform';
import { rolesOf, stateOf } from '$lib/server/people/standing';
import { idOf, person } from '../../support/people';
import type { TestRegister } from '../../support/register';
import { bank, entries } from './bank';

let register: TestRegister;
let first: Actor;
let second: Actor;

beforeEach(async () => {
	register = await bank();
	first = person(register, { roles: ['admin'] });
	second = person(register, { roles: ['admin'] });
});
afterEach(() => register.close());

const act = async (actor: Actor, what: Act, beside: Beside = {}): Promise<Outcome> => {
	const { challenge } = await prepare(register.ctx, actor, what, beside);
	const signed = await takeStepUp(register.ctx, actor, { challenge, response: '' });
	return perform(register.ctx, actor, what, signed, beside);
};
const held = (who: PersonId): readonly Role[] =>
	rolesOf(register.ctx.read, who, register.ctx.now().toISOString());
const last = () => entries(register).at(-1)!;
const proposalBy = async (admin: Actor, who: PersonId, role: Role): Promise<number> => {
	await act(admin, { kind: 'grant', person: who, role });
	return last().seq;
};

test('one admin grants the role of owner', async () => {
	const ann = idOf(person(register));
	await act(first, { kind: 'grant', person: ann, role: 'owner' });
	expect(held(ann)).toEqual(['owner']);
});

describe.each(['validator', 'head', 'auditor', 'admin'] as const)('%s needs two admins', (role) => {
	test('the second signs the first one’s statement', async () => {
		const ann = idOf(person(register));
		const proposal = await proposalBy(first, ann, role);
		expect(held(ann)).toEqual([]);
		const signedFirst = last().auth.stepUp!.statement;
		await act(second, { kind: 'approve', proposal });
		expect(held(ann)).toEqual([role]);
		const granted = entries(register).find(({ type, seq }) => type === 'role.granted' && seq > proposal)!;
		expect(granted).toMatchObject({
			actor: second.person,
			payload: { person: ann, role, proposal, statement: digestOf(Buffer.from(signedFirst)) },
			auth: { role: 'admin', rule: 'role.approve', means: 'seat' }
		});
	});
});

describe('S6', () => {
	test('nobody grants to themselves', async () => {
		await expect(act(first, { kind: 'grant', person: idOf(first), role: 'owner' })).rejects.toMatchObject({
			rule: 'S6'
		});
	});
	test('nobody approves what they proposed', async () => {
		const proposal = await proposalBy(first, idOf(person(register)), 'validator');
		await expect(act(first, { kind: 'approve', proposal })).rejects.toMatchObject({ rule: 'S6' });
	});
	test('nobody approves what is for themselves', async () => {
		await act(first, { kind: 'recover', person: idOf(second) });
		await expect(act(second, { kind: 'approve', proposal: last().seq })).rejects.toMatchObject({
			rule: 'S6'
		});
	});
	test.each(['end-role', 'disable'] as const)('nobody does it to themselves: %s', async (kind) => {
		person(register, { roles: ['admin'] });
		const what: Act =
			kind === 'disable' ? { kind, person: idOf(first) } : { kind, person: idOf(first), role: 'admin' };
		await expect(act(first, what)).rejects.toMatchObject({ rule: 'S6' });
	});
});

describe('S4', () => {
	test.each([
		['owner', 'admin'],
		['owner', 'auditor'],
		['owner', 'head'],
		['validator', 'admin'],
		['auditor', 'owner'],
		['head', 'owner'],
		['admin', 'validator']
	] as const)('who is %s does not become %s', async (has, wanted) => {
		const ann = idOf(person(register, { roles: [has] }));
		await expect(act(first, { kind: 'grant', person: ann, role: wanted })).rejects.toMatchObject({
			rule: 'S4'
		});
	});
	test('holds again when the second approves', async () => {
		const ann = idOf(person(register));
		const proposal = await proposalBy(first, ann, 'admin');
		await act(first, { kind: 'grant', person: ann, role: 'owner' });
		await expect(act(second, { kind: 'approve', proposal })).rejects.toMatchObject({ rule: 'S4' });
	});
	test('a head may validate, an owner may validate other models', async () => {
		const ann = idOf(person(register, { roles: ['head'] }));
		expect(await proposalBy(first, ann, 'validator')).toBeGreaterThan(0);
		const ben = idOf(person(register, { roles: ['owner'] }));
		expect(await proposalBy(first, ben, 'validator')).toBeGreaterThan(0);
	});
});

describe('S7', () => {
	test('of two admins none can be ended or disabled', async () => {
		await expect(act(first, { kind: 'disable', person: idOf(second) })).rejects.toMatchObject({ rule: 'S7' });
		await expect(act(first, { kind: 'end-role', person: idOf(second), role: 'admin' })).rejects.toMatchObject(
			{ rule: 'S7' }
		);
	});
	test('of three one can', async () => {
		person(register, { roles: ['admin'] });
		await act(first, { kind: 'disable', person: idOf(second) });
		expect(stateOf(register.ctx.read, idOf(second))).toBe('disabled');
	});
	test('one admin alone grants nothing above owner', async () => {
		const lonely = await bank();
		const admin = person(lonely, { roles: ['admin'] });
		const ann = idOf(person(lonely));
		await expect(
			prepare(lonely.ctx, admin, { kind: 'grant', person: ann, role: 'validator' })
		).rejects.toMatchObject({ rule: 'S7' });
		expect(await prepare(lonely.ctx, admin, { kind: 'grant', person: ann, role: 'owner' })).toBeDefined();
		lonely.close();
	});
});

describe('a proposal', () => {
	test('is over after 72 hours', async () => {
		const proposal = await proposalBy(first, idOf(person(register)), 'validator');
		register.clock.forward(72 * 3600_000);
		await expect(act(second, { kind: 'approve', proposal })).rejects.toThrow(Conflict);
	});
	test('is approved once', async () => {
		const proposal = await proposalBy(first, idOf(person(register)), 'validator');
		await act(second, { kind: 'approve', proposal });
		const third = person(register, { roles: ['admin'] });
		await expect(act(third, { kind: 'approve', proposal })).rejects.toThrow(Conflict);
	});
	test('can be taken back', async () => {
		const proposal = await proposalBy(first, idOf(person(register)), 'validator');
		expect(waitingProposals(register.ctx, second)).toMatchObject([{ seq: proposal, mayApprove: true }]);
		expect(waitingProposals(register.ctx, first)).toMatchObject([{ seq: proposal, mayApprove: false }]);
		withdraw(register.ctx, second, proposal);
		expect(waitingProposals(register.ctx, second)).toEqual([]);
		await expect(act(second, { kind: 'approve', proposal })).rejects.toThrow(Conflict);
	});
	test('waits once', async () => {
		const ann = idOf(person(register));
		await proposalBy(first, ann, 'validator');
		await expect(act(second, { kind: 'grant', person: ann, role: 'validator' })).rejects.toThrow(Conflict);
	});
});

test('only admins act upon people', async () => {
	const ann = idOf(person(register));
	for (const role of ['owner', 'validator', 'head', 'auditor'] as const) {
		const other = person(register, { roles: [role] });
		await expect(act(other, { kind: 'grant', person: ann, role: 'owner' })).rejects.toMatchObject({
			rule: 'S11'
		});
	}
});

test('a role ends at once, its sessions too, and stays on record with both dates', async () => {
	const ann = person(register, { roles: ['owner'] });
	const limits = { idle: 30, absolute: 720 };
	const token = await openSession(register.ctx, idOf(ann), {
		means: 'passkey',
		limits,
		agent: '',
		request: 'test'
	});
	register.clock.forward(60_000);
	await act(first, { kind: 'end-role', person: idOf(ann), role: 'owner' });
	expect(held(idOf(ann))).toEqual([]);
	expect(await sessionOf(register.ctx, token)).toBeNull();
	expect(rolesOf(register.ctx.read, idOf(ann), '2026-03-02T09:00:30.000Z')).toEqual(['owner']);
});

test('two admins re-enable', async () => {
	const ann = idOf(person(register, { roles: ['owner'] }));
	await act(first, { kind: 'disable', person: ann });
	await act(first, { kind: 're-enable', person: ann });
	expect(stateOf(register.ctx.read, ann)).toBe('disabled');
	await act(second, { kind: 'approve', proposal: last().seq });
	expect(stateOf(register.ctx.read, ann)).toBe('enrolled');
});

describe('step-up', () => {
	const ann = () => idOf(person(register));
	const keyOf = (who: PersonId): string => {
		const entry = entries(register).find(
			({ type, subjects }) => type === 'credential.enrolled' && subjects[0]!.ref === who
		)!;
		return (entry.payload as { publicKey: string }).publicKey;
	};

	test('is kept in the entry and verifies from bytes alone', async () => {
		await act(first, { kind: 'grant', person: ann(), role: 'owner' });
		const granted = entries(register).findLast(({ type }) => type === 'role.granted')!;
		const statement = verifyStepUp(
			granted.auth.stepUp as StepUp,
			keyOf(idOf(first)),
			register.ctx.config.origin
		);
		expect(statement).toMatchObject({
			action: 'role.grant',
			by: first.person,
			register: register.ctx.log.origin,
			digests: [{ name: 'payload', sha256: digestOf(Buffer.from(canonical(granted.payload))) }],
			log: { size: granted.seq }
		});
	});
	test('of another act is a conflict', async () => {
		const [one, two] = [ann(), ann()];
		const { challenge } = await prepare(register.ctx, first, { kind: 'grant', person: one, role: 'owner' });
		const signed = await takeStepUp(register.ctx, first, { challenge, response: '' });
		const other: Act = { kind: 'grant', person: two, role: 'owner' };
		expect(() => perform(register.ctx, first, other, signed)).toThrow(Conflict);
		expect(held(two)).toEqual([]);
	});
	test('is used once', async () => {
		const { challenge } = await prepare(register.ctx, first, { kind: 'grant', person: ann(), role: 'owner' });
		await takeStepUp(register.ctx, first, { challenge, response: '' });
		await expect(takeStepUp(register.ctx, first, { challenge, response: '' })).rejects.toThrow(Refused);
	});
	test('of another session is refused', async () => {
		const { challenge } = await prepare(register.ctx, first, { kind: 'grant', person: ann(), role: 'owner' });
		await expect(takeStepUp(register.ctx, second, { challenge, response: '' })).rejects.toThrow(Refused);
	});
	test('is over after five minutes', async () => {
		const { challenge } = await prepare(register.ctx, first, { kind: 'grant', person: ann(), role: 'owner' });
		register.clock.forward(5 * 60_000);
		await expect(takeStepUp(register.ctx, first, { challenge, response: '' })).rejects.toThrow(/over/);
	});
});

test('an invitation gives a link whose secret stands in the fragment; a name already known is refused', async () => {
	const identity = { name: 'Ilse Brand', mail: 'ilse@bank.example', staffNumber: '77' };
	const outcome = await act(first, { kind: 'invite' }, { identity });
	expect(outcome).toMatchObject({
		kind: 'link',
		url: expect.stringMatching(/^http:\/\/localhost:3000\/enrol#[A-Za-z0-9_-]{43}$/)
	});
	await expect(act(first, { kind: 'invite' }, { identity })).rejects.toMatchObject({
		issues: [{ pointer: '/mail' }]
	});
});
