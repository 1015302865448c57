import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import type { Actor, PersonId } from '$lib/domain/actor';
import { Conflict, Invalid, Refused } from '$lib/domain/faults';
import { takeStepUp } from '$lib/server/auth/step-up';
import { developerCandidates, validatorCandidates } from '$lib/server/register/candidates';
import { modelFacts, partiesOf } from '$lib/server/register/facts';
import { editModel, registerModel } from '$lib/server/register/model';
import { modelSheet } from '$lib/server/register/model-sheet';
import { assignValidator } from '$lib/server/register/parties';
import { declareSigns } from '$lib/server/register/signs';
import { changeTeam, prepareTeamChange, type TeamChange } from '$lib/server/register/team';
import { modelInput, openBank, unemploymentUp, type Bank } from './bank';

let bank: Bank;
let owner: Actor;
let model: string;
beforeEach(async () => {
	bank = await openBank({ at: '2026-03-02T09:00:00.000Z' });
	owner = bank.person('T. Halvar', 'owner');
	model = registerModel(bank.ctx, owner, modelInput());
});
afterEach(() => bank.close());

const id = ({ person }: Actor): PersonId => person as PersonId;

const change = async (
	admin: Actor,
	kind: TeamChange,
	person: Actor,
	relation: 'owner' | 'developer'
): Promise<void> => {
	const { challenge } = await prepareTeamChange(bank.ctx, admin, kind, {
		model,
		person: id(person),
		relation
	});
	changeTeam(bank.ctx, admin, kind, await takeStepUp(bank.ctx, admin, { challenge, response: '' }));
};

describe('owners and developers', () => {
	it('are appointed and ended by an admin with a signature', async () => {
		const admin = bank.person('N. Selwyn', 'admin');
		const next = bank.person('S. Oduya', 'owner');
		await change(admin, 'start', next, 'owner');
		await change(admin, 'start', next, 'developer');
		expect(partiesOf(bank.ctx.read, id(next))).toEqual([
			{ model, party: 'developer' },
			{ model, party: 'owner' }
		]);
		await expect(change(admin, 'start', next, 'owner')).rejects.toThrow(Conflict);
		bank.clock.forward(1000);
		await change(admin, 'end', owner, 'owner');
		expect(modelSheet(bank.ctx, next, model).parties).toContainEqual(
			expect.objectContaining({ name: 'T. Halvar', relation: 'owner', until: '2026-03-02T09:00:01.000Z' })
		);
		await expect(change(admin, 'end', next, 'owner')).rejects.toThrow('would have no owner');
		await expect(change(admin, 'end', owner, 'owner')).rejects.toThrow(Conflict);
		expect(() => modelSheet(bank.ctx, owner, model)).toThrow(Refused);
	});

	it('hold the roles that allow it, and nobody else appoints them', async () => {
		const admin = bank.person('N. Selwyn', 'admin');
		const validator = bank.person('I. Marrow', 'validator');
		const head = bank.person('G. Ostrom', 'head');
		await expect(change(owner, 'start', validator, 'developer')).rejects.toThrow(Refused);
		await expect(change(admin, 'start', validator, 'owner')).rejects.toThrow(Invalid);
		await expect(change(admin, 'start', head, 'developer')).rejects.toThrow(
			expect.objectContaining({ rule: 'S4' })
		);
	});

	it('are as they were when the page was opened, or nothing is stored', async () => {
		const admin = bank.person('N. Selwyn', 'admin');
		const [one, two] = [bank.person('S. Oduya', 'owner'), bank.person('R. Ellin', 'owner')];
		const prepared = await prepareTeamChange(bank.ctx, admin, 'start', {
			model,
			person: id(one),
			relation: 'owner'
		});
		const signed = await takeStepUp(bank.ctx, admin, { challenge: prepared.challenge, response: '' });
		const forged = { ...signed, payload: { model, person: id(two), relation: 'owner' } };
		expect(() => changeTeam(bank.ctx, admin, 'start', forged)).toThrow(Conflict);
		expect(() => changeTeam(bank.ctx, admin, 'end', signed)).toThrow(Conflict);
		expect(partiesOf(bank.ctx.read, id(two))).toEqual([]);
	});
});

describe('who touched a model', () => {
	it('is whoever owned, developed, edited or declared within the look-back, and no validator', async () => {
		const { ctx } = bank;
		const admin = bank.person('N. Selwyn', 'admin');
		const head = bank.person('G. Ostrom', 'head');
		const validator = bank.person('I. Marrow', 'validator');
		const developer = bank.person('R. Ellin', 'owner', 'validator');
		await change(admin, 'start', developer, 'developer');
		assignValidator(ctx, head, { model, person: id(validator) });
		declareSigns(ctx, developer, { model, drivers: [unemploymentUp] });
		declareSigns(ctx, validator, { model, side: 'validator', drivers: [unemploymentUp] });
		editModel(ctx, owner, model, { portfolio: 'cards' });
		const touched = () => [...modelFacts(ctx, ctx.read, model)!.touched].sort();
		expect(touched()).toEqual([id(owner), id(developer)].sort());
		expect(validatorCandidates(ctx, model)).toEqual([]);
		bank.clock.forward(1000);
		await change(admin, 'end', developer, 'developer');
		// Still within the 24 months of the policy.
		bank.clock.set('2028-03-01T09:00:00.000Z');
		expect(touched()).toContain(id(developer));
		bank.clock.set('2028-03-03T09:00:00.000Z');
		expect(touched()).toEqual([id(owner)]);
		expect(validatorCandidates(ctx, model)).toEqual([{ person: id(developer), name: 'R. Ellin' }]);
		assignValidator(ctx, head, { model, person: id(developer) });
		expect(modelFacts(ctx, ctx.read, 'M-404')).toBeUndefined();
	});

	it('offers as developers whoever may be one', () => {
		bank.person('N. Selwyn', 'admin');
		bank.person('G. Ostrom', 'head');
		bank.person('I. Marrow', 'validator');
		bank.person('S. Oduya', 'owner');
		expect(developerCandidates(bank.ctx, owner).map(({ name }) => name)).toEqual(['I. Marrow', 'S. Oduya']);
	});
});
