import { error } from '@sveltejs/kit';
import type { RequestEvent } from '@sveltejs/kit';
import { Absent, Conflict, Invalid, Refused } from '$lib/domain/faults';
import { recordRefusal } from '$lib/server/people/refusals';

/** A fault that the domain knows, as the dialect of routes says it. */
export interface Answered {
	readonly status: number;
	readonly title: string;
	readonly detail: string;
	readonly rule?: string;
	readonly issues?: Invalid['issues'];
}

/** What the asker may not know of is answered word for word like what does not exist. */
const nothing = 'There is nothing under this address or reference.';

/**
 * Turns a known fault into its answer, and enters a refusal in the log.
 * Anything else is thrown on: the one error door (handleError) gives it an id.
 */
export const answered = (event: RequestEvent, fault: unknown): Answered => {
	if (fault instanceof Invalid)
		return { status: 400, title: 'Not valid', detail: fault.message, issues: fault.issues };
	if (fault instanceof Absent) return { status: 404, title: 'Not found', detail: nothing };
	if (fault instanceof Conflict) return { status: 409, title: 'Conflict', detail: fault.message };
	if (fault instanceof Refused) {
		const { ctx, actor } = event.locals;
		if (actor) recordRefusal(ctx, actor, fault);
		return fault.visible
			? { status: 403, title: 'Refused', detail: fault.message, rule: fault.rule }
			: { status: 404, title: 'Not found', detail: nothing };
	}
	throw fault;
};

/** The same, as SvelteKit's expected error. */
export const refuseWith = (event: RequestEvent, fault: unknown): never => {
	const { status, detail, rule } = answered(event, fault);
	error(status, { message: detail, ...(rule === undefined ? {} : { rule }) });
};
