import { z } from 'zod';
import type { Actor, PersonId } from '$lib/domain/actor';
import { Absent, Conflict, Invalid } from '$lib/domain/faults';
import { policyTier } from '$lib/domain/policy';
import { reasonSchema, taken } from '$lib/domain/register-input';
import { tierInForce, type TierAnswer, type TierInForce } from '$lib/domain/tier';
import { record } from '$lib/server/log/record';
import { allow } from '$lib/server/people/allow';
import { adoptedPolicy } from '$lib/server/policy/policy';
import type { Ctx } from '../context';
import type { Handle } from '../db/handle';
import { modelByRef } from './register.queries';

type ModelRow = NonNullable<ReturnType<typeof rowOf>>;
const rowOf = (handle: Handle, model: string) => handle.first(modelByRef(handle.q, model));

const required = (handle: Handle, model: string): ModelRow => {
	const row = rowOf(handle, model);
	if (!row) throw new Absent(`There is no model ${model}.`);
	return row;
};

/** The tier in force of a model's row under a policy. */
export const tierOfRow = (
	policy: Parameters<typeof tierInForce>[0],
	row: Pick<ModelRow, 'answers' | 'tier' | 'tier_how'>
): TierInForce =>
	tierInForce(policy, JSON.parse(row.answers) as TierAnswer[], { tier: row.tier, how: row.tier_how });

/** The tier in force of a model, by the policy adopted on this handle. */
export const tierOfModel = (ctx: Ctx, handle: Handle, model: string): TierInForce =>
	tierOfRow(adoptedPolicy(ctx, handle).policy, required(handle, model));

const confirmation = z.strictObject({ model: z.string(), tier: z.int(), reason: reasonSchema.optional() });
const override = z.strictObject({ model: z.string(), tier: z.int(), reason: reasonSchema });

/**
 * A validator confirms the tier that the answers give; `tier` is what they saw.
 * @throws Conflict when the answers or the policy give another tier by now
 */
export const confirmTier = (ctx: Ctx, actor: Actor, input: z.input<typeof confirmation>): void => {
	const { model, tier, reason } = taken(confirmation, input);
	ctx.write((tx) => {
		const grant = allow(ctx, tx, actor, 'tier.confirm', { model });
		const { proposed } = tierOfModel(ctx, tx, model);
		if (proposed !== tier)
			throw new Conflict(`The answers give tier ${proposed} by now, not ${tier}: look again, then confirm.`);
		record(ctx, tx, actor, grant, {
			type: 'tier.confirmed',
			subjects: [model],
			payload: { model, tier, proposed, ...(reason !== undefined && { reason }) }
		});
	});
};

/** A validator proposes another tier than the answers give; it takes effect when the head signs. */
export const proposeOverride = (ctx: Ctx, actor: Actor, input: z.input<typeof override>): void => {
	const { model, tier, reason } = taken(override, input);
	ctx.write((tx) => {
		const grant = allow(ctx, tx, actor, 'tier.override', { model });
		const { policy } = adoptedPolicy(ctx, tx);
		if (!policyTier(policy, tier))
			throw new Invalid([{ pointer: '/tier', message: `The adopted policy has no tier ${tier}.` }]);
		const { proposed } = tierOfRow(policy, required(tx, model));
		if (proposed === tier)
			throw new Invalid([
				{ pointer: '/tier', message: `The answers give tier ${tier}: confirm it instead.` }
			]);
		record(ctx, tx, actor, grant, {
			type: 'tier.override-proposed',
			subjects: [model],
			payload: { model, tier, proposed, reason }
		});
	});
};

/** The head of model risk agrees to the proposed override: the second person of the pair. */
export const agreeOverride = (ctx: Ctx, actor: Actor, model: string): void => {
	ctx.write((tx) => {
		const row = required(tx, model);
		const first = row.override_by === null ? undefined : (row.override_by as PersonId);
		const grant = allow(ctx, tx, actor, 'tier.override', { model, ...(first && { first }) });
		if (row.override_tier === null || row.override_reason === null || first === undefined)
			throw new Conflict(`No override is proposed for ${model}.`);
		record(ctx, tx, actor, grant, {
			type: 'tier.overridden',
			subjects: [model],
			payload: { model, tier: row.override_tier, reason: row.override_reason, proposedBy: first }
		});
	});
};
