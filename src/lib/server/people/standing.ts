import type { PersonId, Role } from '$lib/domain/actor';
import type { Handle } from '$lib/server/db/handle';
import { holdersAt, personState, rolesAt } from './people.queries';

/** Roles in force at an instant, in the order of the alphabet. */
export const rolesOf = (handle: Handle, person: PersonId, at: string): readonly Role[] =>
	Object.freeze([...new Set(handle.all(rolesAt(handle.q, person, at)).map(({ role }) => role as Role))]);

export type State = 'invited' | 'enrolled' | 'disabled';

/** Undefined for an id that the register does not know. */
export const stateOf = (handle: Handle, person: PersonId): State | undefined =>
	handle.first(personState(handle.q, person))?.state;

const day = 24 * 60 * 60 * 1000;

/** Whether the person came back through recovery within the 24 hours before `now`. */
export const recoveredLately = (handle: Handle, person: PersonId, now: Date): boolean => {
	const at = handle.first(personState(handle.q, person))?.recovered_at;
	return at != null && now.getTime() - Date.parse(at) < day;
};

/** Enrolled admins in force. */
export const adminsAt = (handle: Handle, at: string): readonly PersonId[] =>
	handle.all(holdersAt(handle.q, 'admin', at)).map(({ person }) => person as PersonId);
