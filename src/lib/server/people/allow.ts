import type { Actor, PersonId, Role } from '$lib/domain/actor';
import type { Grant } from '$lib/domain/entry';
import { Absent, Refused } from '$lib/domain/faults';
import type { Action, Purpose } from '$lib/domain/permission-table';
import { authorize, type Answer, type Facts, type Party, type PersonFacts } from '$lib/domain/permissions';
import { parent } from '$lib/domain/references';
import type { Ctx } from '$lib/server/context';
import type { Handle } from '$lib/server/db/handle';
import { adminsAt, recoveredLately, rolesOf, stateOf } from './standing';

/** What the act is about. */
export interface About {
	/** `M-014`, or a version of it. */
	readonly model?: string;
	readonly person?: PersonId;
	readonly role?: Role;
	readonly party?: Party;
	readonly purpose?: Purpose;
	/** Who started the run in question. */
	readonly starter?: PersonId;
	/** Who signed first, when the second of a pair acts. */
	readonly first?: PersonId;
}

const personFacts = (ctx: Ctx, handle: Handle, person: PersonId, at: string): PersonFacts => {
	const state = stateOf(handle, person);
	if (!state) throw new Absent('There is no such person.');
	return {
		person,
		state,
		roles: rolesOf(handle, person, at),
		parties: ctx.facts.parties(handle, person).map(({ party }) => party),
		otherAdmins: adminsAt(handle, at).filter((admin) => admin !== person).length
	};
};

/** Loads what the answer depends on, from the same handle the act will use. */
const gather = (ctx: Ctx, handle: Handle, actor: Actor, about: About): Facts => {
	const now = ctx.now();
	const at = now.toISOString();
	const { model: ref, person, ...rest } = about;
	const model = ref === undefined ? undefined : ctx.facts.model(handle, parent(ref));
	if (ref !== undefined && !model) throw new Absent(`There is no model ${parent(ref)}.`);
	const self = actor.person === 'system' || actor.person === 'cli' ? undefined : actor.person;
	return {
		...rest,
		// Read again inside the transaction: a role may have ended since the request was identified.
		actor: self ? { ...actor, roles: rolesOf(handle, self, at) } : actor,
		active: self === undefined || stateOf(handle, self) === 'enrolled',
		recovered: self !== undefined && recoveredLately(handle, self, now),
		admins: adminsAt(handle, at).length,
		...(model ? { model } : {}),
		...(person ? { person: personFacts(ctx, handle, person, at) } : {})
	};
};

const ask = (ctx: Ctx, handle: Handle, actor: Actor, action: Action, about: About): Answer =>
	authorize(action, gather(ctx, handle, actor, about));

/**
 * The grant under which an act is entered in the log.
 * @throws Refused naming the rule that stands against it; Absent when the subject does not exist
 */
export const allow = (ctx: Ctx, handle: Handle, actor: Actor, action: Action, about: About = {}): Grant => {
	const answer = ask(ctx, handle, actor, action, about);
	if (answer.allowed) return answer.grant;
	throw new Refused(answer.rule, action, answer.words, answer.visible, about.model ?? about.person);
};

/** Whether an act would be allowed: for pages that show only what their reader can do, and for filtering lists. */
export const may = (ctx: Ctx, handle: Handle, actor: Actor, action: Action, about: About = {}): boolean =>
	ask(ctx, handle, actor, action, about).allowed;
