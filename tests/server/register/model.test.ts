import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { Absent, Conflict, Invalid, Refused } from '$lib/domain/faults';
import { listModels } from '$lib/server/register/model-list';
import { modelHeader, modelSheet } from '$lib/server/register/model-sheet';
import { editModel, registerModel } from '$lib/server/register/model';
import { assignValidator, releaseValidator } from '$lib/server/register/parties';
import { reviewsDue } from '$lib/server/register/reviews';
import { agreeOverride, confirmTier, proposeOverride } from '$lib/server/register/tier';
import { tierHistory } from '$lib/server/register/tier-history';
import { waitingInRegister } from '$lib/server/register/waiting';
import type { PersonId } from '$lib/domain/actor';
import { modelInput, openBank, type Bank } from './bank';

let bank: Bank;
beforeEach(async () => {
	bank = await openBank({ at: '2026-03-02T09:00:00.000Z' });
});
afterEach(() => bank.close());

const issuesOf = (work: () => unknown): readonly { pointer: string; message: string }[] => {
	try {
		work();
	} catch (fault) {
		if (fault instanceof Invalid) return fault.issues;
		throw fault;
	}
	throw new Error('it was accepted');
};

describe('registering a model', () => {
	it('gives the next reference, its parties and the tier the answers give', () => {
		const { ctx } = bank;
		const owner = bank.person('T. Halvar', 'owner');
		const developer = bank.person('R. Ellin', 'owner');
		expect(registerModel(ctx, owner, modelInput())).toBe('M-001');
		const ref = registerModel(
			ctx,
			owner,
			modelInput({ name: '  Card utilisation ', materiality: 4, developers: [developer.person as PersonId] })
		);
		expect(ref).toBe('M-002');
		const sheet = modelSheet(ctx, developer, ref);
		expect(sheet).toMatchObject({
			name: 'Card utilisation',
			state: 'signs not declared',
			versions: 'no version yet',
			uses: ['capital stress', 'provisioning'],
			// 4 × 2 reaches the 8 of tier 1.
			tier: { tier: 1, how: 'proposed', proposed: 1, score: 8 },
			due: { date: '2027-03-02', overdue: false, reason: 'tier 1: 12 months from 2026-03-02' }
		});
		expect(sheet.parties.map(({ name, relation }) => [name, relation])).toEqual(
			expect.arrayContaining([
				['T. Halvar', 'owner'],
				['R. Ellin', 'developer']
			])
		);
	});

	it('names the field that is missing, too long or not the policy’s', () => {
		const owner = bank.person('T. Halvar', 'owner');
		const register = (changed: object) => () =>
			registerModel(bank.ctx, owner, { ...modelInput(), ...changed } as never);
		expect(issuesOf(register({ name: '  ' }))).toEqual([{ pointer: '/name', message: 'Name the model.' }]);
		expect(issuesOf(register({ uses: [] }))).toMatchObject([{ pointer: '/uses' }]);
		expect(issuesOf(register({ materiality: 9 }))).toEqual([
			{ pointer: '/materiality', message: "Choose one of the policy's answers: 1, 2, 3, 4." }
		]);
		expect(issuesOf(register({ name: 'a\u202eb' }))).toMatchObject([{ pointer: '/name' }]);
		expect(issuesOf(register({ developers: ['p_aaaaaaaaaaaaaaaaaaaaaaaaaa'] }))).toMatchObject([
			{ pointer: '/developers/0' }
		]);
		const head = bank.person('G. Ostrom', 'head');
		expect(issuesOf(register({ developers: [head.person] }))[0]?.message).toContain('develop no models');
		expect(listModels(bank.ctx, owner)).toEqual([]);
	});

	it.each(['validator', 'head', 'auditor', 'admin'] as const)('is refused to a %s', (role) => {
		const actor = bank.person('Somebody', role);
		expect(() => registerModel(bank.ctx, actor, modelInput())).toThrow(Refused);
	});

	it('keeps text as it was meant and changes only what is edited', () => {
		const owner = bank.person('T. Halvar', 'owner');
		const ref = registerModel(bank.ctx, owner, modelInput({ name: 'Cafe\u0301', purpose: 'line\r\nline' }));
		expect(modelSheet(bank.ctx, owner, ref)).toMatchObject({ name: 'Caf\u00e9', purpose: 'line\nline' });
		editModel(bank.ctx, owner, ref, { portfolio: 'cards', uses: ['plan', 'plan'], complexity: 3 });
		expect(modelSheet(bank.ctx, owner, ref)).toMatchObject({
			name: 'Caf\u00e9',
			portfolio: 'cards',
			uses: ['plan'],
			tier: { tier: 1, score: 9 }
		});
		const stranger = bank.person('S. Oduya', 'owner');
		expect(() => editModel(bank.ctx, stranger, ref, { portfolio: 'mine' })).toThrow(Refused);
		expect(() => editModel(bank.ctx, owner, 'M-777', { portfolio: 'x' })).toThrow(Absent);
	});
});

describe('who sees what', () => {
	it('shows owners of other models the header only', () => {
		const owner = bank.person('T. Halvar', 'owner');
		const stranger = bank.person('S. Oduya', 'owner');
		const auditor = bank.person('A. Lind', 'auditor');
		const ref = registerModel(bank.ctx, owner, modelInput());
		expect(listModels(bank.ctx, stranger)).toEqual([
			{ ref, name: 'Loss rate, unsecured retail', tier: 2, tierHow: 'proposed', state: 'signs not declared' }
		]);
		expect(listModels(bank.ctx, auditor)[0]?.whole).toMatchObject({ owners: ['T. Halvar'] });
		expect(() => modelSheet(bank.ctx, stranger, ref)).toThrow(Refused);
		expect(modelHeader(bank.ctx, stranger, ref)).toMatchObject({ ref, tier: { tier: 2 } });
		expect(reviewsDue(bank.ctx, stranger)).toEqual([]);
		expect(reviewsDue(bank.ctx, auditor)).toHaveLength(1);
	});
});

describe('validators', () => {
	it('are assigned and released by the head, never from those who worked on the model', () => {
		const { ctx } = bank;
		const owner = bank.person('T. Halvar', 'owner');
		const head = bank.person('G. Ostrom', 'head');
		const validator = bank.person('I. Marrow', 'validator');
		const both = bank.person('B. Both', 'owner', 'validator');
		const model = registerModel(ctx, owner, modelInput({ developers: [both.person as PersonId] }));
		const assign = (actor: typeof head, person: typeof head) => () =>
			assignValidator(ctx, actor, { model, person: person.person as PersonId });
		expect(assign(owner, validator)).toThrow(Refused);
		expect(assign(head, both)).toThrow(expect.objectContaining({ rule: 'S1' }));
		expect(assign(head, owner)).toThrow();
		assign(head, validator)();
		expect(assign(head, validator)).toThrow(Conflict);
		expect(modelSheet(ctx, validator, model).may.confirmTier).toBe(true);
		bank.clock.forward(60_000);
		releaseValidator(ctx, head, { model, person: validator.person as PersonId });
		expect(modelSheet(ctx, validator, model).may.confirmTier).toBe(false);
		const party = modelSheet(ctx, validator, model).parties.find(({ relation }) => relation === 'validator');
		expect(party).toMatchObject({ until: '2026-03-02T09:01:00.000Z' });
		// Assigned again: a new row beside the ended one.
		bank.clock.forward(60_000);
		assign(head, validator)();
		expect(modelSheet(ctx, validator, model).parties.filter((p) => p.relation === 'validator')).toHaveLength(
			2
		);
	});
});

describe('the tier', () => {
	const setUp = () => {
		const owner = bank.person('T. Halvar', 'owner');
		const head = bank.person('G. Ostrom', 'head');
		const validator = bank.person('I. Marrow', 'validator');
		const model = registerModel(bank.ctx, owner, modelInput());
		assignValidator(bank.ctx, head, { model, person: validator.person as PersonId });
		return { owner, head, validator, model };
	};

	it('is confirmed by a validator as it is proposed, and stands when answers change', () => {
		const { owner, validator, model } = setUp();
		const { ctx } = bank;
		expect(waitingInRegister(ctx, validator)).toMatchObject([
			{ model, what: 'tier 2 is proposed and not confirmed' }
		]);
		expect(() => confirmTier(ctx, owner, { model, tier: 2 })).toThrow(Refused);
		expect(() => confirmTier(ctx, validator, { model, tier: 1 })).toThrow(Conflict);
		confirmTier(ctx, validator, { model, tier: 2 });
		expect(waitingInRegister(ctx, validator)).toEqual([]);
		editModel(ctx, owner, model, { materiality: 4 });
		expect(modelSheet(ctx, owner, model).tier).toEqual({ tier: 2, how: 'confirmed', proposed: 1, score: 8 });
		expect(waitingInRegister(ctx, validator)).toMatchObject([
			{ what: 'the answers give tier 1 now; tier 2 was confirmed' }
		]);
	});

	it('is overridden by a validator and the head together', () => {
		const { owner, head, validator, model } = setUp();
		const { ctx } = bank;
		expect(() => proposeOverride(ctx, validator, { model, tier: 2, reason: 'x' })).toThrow(Invalid);
		expect(() => proposeOverride(ctx, validator, { model, tier: 7, reason: 'x' })).toThrow(Invalid);
		expect(() => proposeOverride(ctx, validator, { model, tier: 1, reason: ' ' })).toThrow(Invalid);
		expect(() => agreeOverride(ctx, head, model)).toThrow();
		proposeOverride(ctx, validator, { model, tier: 1, reason: 'Feeds the severe scenario.' });
		expect(modelSheet(ctx, owner, model)).toMatchObject({
			tier: { tier: 2, how: 'proposed' },
			override: { tier: 1, by: 'I. Marrow' }
		});
		expect(() => agreeOverride(ctx, validator, model)).toThrow(Refused);
		expect(() => agreeOverride(ctx, owner, model)).toThrow(Refused);
		expect(waitingInRegister(ctx, head)).toHaveLength(1);
		agreeOverride(ctx, head, model);
		expect(modelSheet(ctx, owner, model).tier).toMatchObject({ tier: 1, how: 'overridden', proposed: 2 });
		expect(tierHistory(ctx, owner, model).map(({ what }) => what)).toEqual([
			'registered',
			'tier 1 proposed instead of 2',
			'tier 1 set, agreed by the head of model risk'
		]);
	});
});

describe('the review', () => {
	it('falls due by the interval of the tier, on dates of the bank’s zone', async () => {
		const owner = bank.person('T. Halvar', 'owner');
		// 23:30 UTC on 28 February is 29 February in Berlin.
		bank.clock.set('2028-02-28T23:30:00.000Z');
		const ref = registerModel(bank.ctx, owner, modelInput());
		const due = () => reviewsDue(bank.ctx, owner)[0]!.due;
		expect(due()).toMatchObject({ date: '2029-02-28', reason: 'tier 2: 12 months from 2028-02-29' });
		bank.clock.set('2029-02-28T12:00:00.000Z');
		expect(due()).toMatchObject({ days: 0, overdue: false });
		bank.clock.set('2029-03-11T12:00:00.000Z');
		expect(due()).toMatchObject({ days: -11, overdue: true });
		expect(modelSheet(bank.ctx, owner, ref).state).toBe('review overdue');
		expect(waitingInRegister(bank.ctx, owner)[0]).toMatchObject({
			what: 'review overdue by 11 days, tier 2: 12 months from 2028-02-29',
			overdue: true
		});
	});
});
