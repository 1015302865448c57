import type { Actor } from '$lib/domain/actor';
import type { Action } from '$lib/domain/permission-table';
import { may } from '$lib/server/people/allow';
import type { Ctx } from '../context';
import type { Handle } from '../db/handle';
import { partiesOf } from './facts';
import { allModels } from './register.queries';

type Reading = Extract<Action, 'model.read' | 'version.read' | 'run.read'>;

/** The actor's relations to each model: `owner`, `developer,owner`. */
const relationsOf = (handle: Handle, actor: Actor): ReadonlyMap<string, string> => {
	const relations = new Map<string, string>();
	if (actor.person === 'system' || actor.person === 'cli') return relations;
	for (const { model, party } of partiesOf(handle, actor.person))
		relations.set(model, [relations.get(model), party].filter(Boolean).join());
	return relations;
};

/**
 * Which models an actor may read, for lists. For reading the permission table looks at the actor's roles and relations
 * to the model and at nothing else, so that it is asked once for each set of relations and not a thousand times.
 */
export const readable = (
	ctx: Ctx,
	handle: Handle,
	actor: Actor,
	action: Reading = 'model.read'
): ((model: string) => boolean) => {
	const relations = relationsOf(handle, actor);
	const answers = new Map<string, boolean>();
	return (model) => {
		const related = relations.get(model) ?? '';
		let answer = answers.get(related);
		if (answer === undefined) {
			answer = may(ctx, handle, actor, action, { model });
			answers.set(related, answer);
		}
		return answer;
	};
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
