import type { Actor } from '$lib/domain/actor';
import { reviewDue, type ReviewDue } from '$lib/domain/tier';
import { adoptedPolicy } from '$lib/server/policy/policy';
import type { Policy } from '$lib/domain/policy';
import type { Ctx } from '../context';
import type { Handle } from '../db/handle';
import { allModels } from './register.queries';
import { tierOfRow } from './tier';
import { readable } from './visible';

export interface ModelDue {
	readonly model: string;
	readonly name: string;
	readonly due: ReviewDue;
}

type ModelRow = ReturnType<typeof rows>[number];
const rows = (handle: Handle) => handle.all(allModels(handle.q));

/** When a model is to be reviewed: its registration plus the interval of its tier under a policy. */
export const dueOfRow = (
	ctx: Pick<Ctx, 'config' | 'now'>,
	policy: Policy,
	row: Pick<ModelRow, 'answers' | 'tier' | 'tier_how' | 'registered_at'>
): ReviewDue | undefined =>
	reviewDue(policy, ctx.config.zone, tierOfRow(policy, row).tier, row.registered_at, ctx.now());

/** The coming reviews of the models that the reader sees whole, earliest first. */
export const reviewsDue = (ctx: Ctx, actor: Actor, handle: Handle = ctx.read): readonly ModelDue[] => {
	const mine = readable(ctx, handle, actor);
	const models = rows(handle).filter(({ ref }) => mine(ref));
	if (models.length === 0) return [];
	const { policy } = adoptedPolicy(ctx, handle);
	return models
		.flatMap((row) => {
			const due = dueOfRow(ctx, policy, row);
			return due ? [{ model: row.ref, name: row.name, due }] : [];
		})
		.sort((a, b) => a.due.date.localeCompare(b.due.date) || a.model.localeCompare(b.model));
};
