import type { Actor, PersonId, Role } from '$lib/domain/actor';
import type { Ctx } from '$lib/server/context';
import { seatActor, seedSeat } from '$lib/server/people/seats';

/** A person to be. */
export interface Someone {
	readonly name?: string;
	readonly roles?: readonly Role[];
}

const names = [
	'Ada Quint',
	'Bo Marl',
	'Cleo Strand',
	'Dov Harrow',
	'Eva Lindt',
	'Finn Ostrow',
	'Gea Pell',
	'Hal Ruys'
];
let made = 0;

/**
 * Makes an enrolled person with roles and returns them as an actor, through the verb that makes demo seats: the key is
 * the server's, so that the actor can sign whatever a test asks. The register need not be a demo.
 */
export const person = ({ ctx }: { readonly ctx: Ctx }, { name, roles = [] }: Someone = {}): Actor => {
	const demo: Ctx = { ...ctx, config: { ...ctx.config, demo: true } };
	const id: PersonId = seedSeat(demo, { name: name ?? names[made++ % names.length]!, roles });
	return seatActor(ctx, id, 'test');
};

/** The id of an actor who is a person. */
export const idOf = ({ person: id }: Actor): PersonId => {
	if (id === 'system' || id === 'cli') throw new Error('Not a person');
	return id;
};
