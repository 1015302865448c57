import type { Actor, Role } from '$lib/domain/actor';
import type { ModelInput } from '$lib/domain/register-input';
import type { Ctx } from '$lib/server/context';
import { authProjectors } from '$lib/server/auth/auth.projectors';
import { people } from '$lib/server/people/directory';
import { peopleProjectors } from '$lib/server/people/people.projectors';
import { seatActor, seedSeat } from '$lib/server/people/seats';
import { adoptReleased } from '$lib/server/policy/policy';
import { releasedPolicies } from '$lib/server/policy/released';
import { projectors } from '$lib/server/projectors';
import { modelFacts, partiesOf } from '$lib/server/register/facts';
import type { Pool } from '$lib/server/runs/pool';
import { runsProjectors } from '$lib/server/runs/runs.projectors';
import { testRegister, type TestRegister } from '../../support/register';

/** A register with the released policy and people in it. */
export interface Bank extends Omit<TestRegister, 'ctx'> {
	readonly ctx: Ctx;
	/** Makes a person with roles, who acts from a demo seat. */
	readonly person: (name: string, ...roles: Role[]) => Actor;
}

/** Opens a bank; `pool` is what computes its runs. */
export const openBank = async (options: { at?: string; pool?: Pool } = {}): Promise<Bank> => {
	const register = await testRegister({
		demo: true,
		projectors: { ...projectors, ...authProjectors, ...peopleProjectors, ...runsProjectors },
		...(options.at !== undefined && { at: options.at })
	});
	const ctx: Ctx = {
		...register.ctx,
		facts: { model: (handle, ref) => modelFacts(ctx, handle, ref), parties: partiesOf },
		people: people(register.ctx.read),
		policies: releasedPolicies(),
		...(options.pool && { pool: options.pool })
	};
	ctx.write((tx) => adoptReleased(ctx, tx));
	return {
		...register,
		ctx,
		person: (name, ...roles) => seatActor(ctx, seedSeat(ctx, { name, roles }))
	};
};

/** What the tests say when they register a model. */
export const modelInput = (changed: Partial<ModelInput> = {}): ModelInput => ({
	name: 'Loss rate, unsecured retail',
	purpose: 'Losses of the unsecured retail portfolio under stress.',
	portfolio: 'retail credit, unsecured',
	uses: ['capital stress', 'provisioning'],
	materiality: 3,
	complexity: 2,
	...changed
});

/** The sign the example specification needs declared. */
export const unemploymentUp = {
	series: 'unemp',
	sign: '+',
	low: 0.1,
	high: 1,
	rationale: 'Losses follow unemployment.'
} as const;
