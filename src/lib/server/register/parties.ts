import type { Actor, PersonId } from '$lib/domain/actor';
import { Conflict, Invalid } from '$lib/domain/faults';
import type { Party } from '$lib/domain/permissions';
import { record } from '$lib/server/log/record';
import { allow } from '$lib/server/people/allow';
import { rolesOf, stateOf } from '$lib/server/people/standing';
import type { Ctx } from '../context';
import type { Handle } from '../db/handle';
import { partiesNow } from './register.queries';

/** A person and the model they are related to. */
export interface Assignment {
	readonly model: string;
	readonly person: PersonId;
}

const inForce = (handle: Handle, { model, person }: Assignment, relation: Party): boolean =>
	handle
		.all(partiesNow(handle.q, model))
		.some((party) => party.person === person && party.relation === relation);

/** The head of model risk assigns a validator; whoever worked on the model within the look-back is refused (S1). */
export const assignValidator = (ctx: Ctx, actor: Actor, assignment: Assignment): void => {
	const { model, person } = assignment;
	ctx.write((tx) => {
		const grant = allow(ctx, tx, actor, 'validation.assign', { model, person });
		const roles = rolesOf(tx, person, ctx.now().toISOString());
		if (stateOf(tx, person) !== 'enrolled' || !roles.includes('validator'))
			throw new Invalid([
				{ pointer: '/person', message: 'This person does not hold the role of validator.' }
			]);
		if (inForce(tx, assignment, 'validator')) throw new Conflict(`This person validates ${model} already.`);
		record(ctx, tx, actor, grant, {
			type: 'party.started',
			subjects: [model, person],
			payload: { model, person, relation: 'validator' }
		});
	});
};

/** Ends a validator's assignment; that they had it stays on record. */
export const releaseValidator = (ctx: Ctx, actor: Actor, assignment: Assignment): void => {
	const { model, person } = assignment;
	ctx.write((tx) => {
		const grant = allow(ctx, tx, actor, 'validation.release', { model, person });
		if (!inForce(tx, assignment, 'validator')) throw new Conflict(`This person does not validate ${model}.`);
		record(ctx, tx, actor, grant, {
			type: 'party.ended',
			subjects: [model, person],
			payload: { model, person, relation: 'validator' }
		});
	});
};
