import type { Actor } from '$lib/domain/actor';
import type { Action } from '$lib/domain/permission-table';
import { may } from '$lib/server/people/allow';
import type { Ctx } from '../context';
import type { Handle } from '../db/handle';
import { partiesOf } from './facts';
import { allModels } from './register.queries';

type Reading = Extract<Action, 'model.read' | 'version.read' | 'run.read'>;

const relatedTo = (handle: Handle, actor: Actor): ReadonlySet<string> =>
	new Set(
		actor.person === 'system' || actor.person === 'cli'
			? []
			: partiesOf(handle, actor.person).map(({ model }) => model)
	);

/**
 * Which models an actor may read, for lists. Models the actor has no relation to are all answered alike by the
 * permission table, so that it is asked once for them and not a thousand times.
 */
export const readable = (
	ctx: Ctx,
	handle: Handle,
	actor: Actor,
	action: Reading = 'model.read'
): ((model: string) => boolean) => {
	const related = relatedTo(handle, actor);
	let others: boolean | undefined;
	return (model) =>
		related.has(model)
			? may(ctx, handle, actor, action, { model })
			: (others ??= may(ctx, handle, actor, action, { model }));
};

/** The models an actor may read, or `all`. */
export const readableModels = (
	ctx: Ctx,
	handle: Handle,
	actor: Actor,
	action: Reading = 'model.read'
): readonly string[] | 'all' => {
	const may = readable(ctx, handle, actor, action);
	const models = handle.all(allModels(handle.q)).map(({ ref }) => ref);
	const mine = models.filter(may);
	return mine.length === models.length ? 'all' : mine;
};
