import type { Actor } from '$lib/domain/actor';
import type { Payload } from '$lib/domain/events';
import { allow } from '$lib/server/people/allow';
import type { Ctx } from '../context';
import type { Handle } from '../db/handle';
import { entriesOfType } from './register.queries';

/** One step in how a model came to its tier. */
export interface TierStep {
	readonly entry: number;
	readonly at: string;
	readonly by: string;
	readonly what: string;
	readonly reason?: string;
}

const types = ['model.registered', 'tier.confirmed', 'tier.override-proposed', 'tier.overridden'] as const;

const words = (type: string, payload: unknown): { what: string; reason?: string } => {
	switch (type) {
		case 'tier.confirmed': {
			const { tier, reason } = payload as Payload<'tier.confirmed'>;
			return { what: `tier ${tier} confirmed`, ...(reason !== undefined && { reason }) };
		}
		case 'tier.override-proposed': {
			const { tier, proposed, reason } = payload as Payload<'tier.override-proposed'>;
			return { what: `tier ${tier} proposed instead of ${proposed}`, reason };
		}
		case 'tier.overridden': {
			const { tier, reason } = payload as Payload<'tier.overridden'>;
			return { what: `tier ${tier} set, agreed by the head of model risk`, reason };
		}
		default:
			return { what: 'registered' };
	}
};

/** How a model came to its tier, oldest first, from the log. */
export const tierHistory = (
	ctx: Ctx,
	actor: Actor,
	model: string,
	handle: Handle = ctx.read
): readonly TierStep[] => {
	allow(ctx, handle, actor, 'model.read', { model });
	const rows = handle.all(entriesOfType(handle.q, model, types));
	const names = ctx.people.names(rows.map((row) => row.actor as `p_${string}`));
	return rows.map(({ seq, at, actor: by, type, body }) =>
		Object.freeze({
			entry: seq,
			at,
			by: names.get(by) ?? by,
			...words(type, (JSON.parse(body) as { payload: unknown }).payload)
		})
	);
};
