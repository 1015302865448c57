import type { Actor, PersonId, Role } from '$lib/domain/actor';
import { compatible } from '$lib/domain/separation';
import { holdersAt } from '$lib/server/people/people.queries';
import { rolesOf } from '$lib/server/people/standing';
import type { Ctx } from '../context';
import type { Handle } from '../db/handle';
import { modelFacts } from './facts';

/** A person who can be chosen in a form. */
export interface Candidate {
	readonly person: PersonId;
	readonly name: string;
}

const holders = (ctx: Ctx, handle: Handle, role: Role): PersonId[] =>
	handle.all(holdersAt(handle.q, role, ctx.now().toISOString())).map(({ person }) => person as PersonId);

const named = (ctx: Ctx, persons: readonly PersonId[]): readonly Candidate[] => {
	const names = ctx.people.names(persons);
	return persons
		.map((person) => Object.freeze({ person, name: names.get(person) ?? person }))
		.sort((a, b) => a.name.localeCompare(b.name, 'en'));
};

/** Who can be named developer beside the actor: enrolled owners and validators whose roles allow it. */
export const developerCandidates = (
	ctx: Ctx,
	actor: Actor,
	handle: Handle = ctx.read
): readonly Candidate[] => {
	const at = ctx.now().toISOString();
	const all = new Set([...holders(ctx, handle, 'owner'), ...holders(ctx, handle, 'validator')]);
	all.delete(actor.person as PersonId);
	return named(
		ctx,
		[...all].filter((person) => compatible(rolesOf(handle, person, at), ['developer']))
	);
};

/** Who can be assigned to validate a model: validators who have not touched it and are not assigned already. */
export const validatorCandidates = (
	ctx: Ctx,
	model: string,
	handle: Handle = ctx.read
): readonly Candidate[] => {
	const facts = modelFacts(ctx, handle, model);
	return named(
		ctx,
		holders(ctx, handle, 'validator').filter(
			(person) => !facts?.touched.has(person) && !facts?.validators.includes(person)
		)
	);
};
