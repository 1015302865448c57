import { fail, type ActionFailure, type RequestEvent } from '@sveltejs/kit';
import type { Actor } from '$lib/domain/actor';
import { Conflict, Invalid } from '$lib/domain/faults';
import type { Ctx } from '$lib/server/context';
import { refuseWith } from '$lib/server/http/faults';
import { signedIn } from '$lib/server/http/serve';

/** One thing to mend: the field's name in the form, empty for the form as a whole. */
export interface Mend {
	readonly field: string;
	readonly message: string;
	readonly code?: string;
}

/** `/columns/0/unit` is the field `columns.0.unit`. */
const fieldOf = (pointer: string): string => pointer.split('/').slice(1).join('.');

/** Runs a verb for a form: what can be mended comes back with the form, refusals are error pages. */
export const mendable = async <T extends object>(
	event: RequestEvent,
	work: (ctx: Ctx, actor: Actor) => T | Promise<T>
): Promise<T | ActionFailure<{ mend: Mend[] }>> => {
	const actor = signedIn(event);
	try {
		return await work(event.locals.ctx, actor);
	} catch (fault) {
		if (fault instanceof Invalid)
			return fail(400, {
				mend: fault.issues.map(({ pointer, message, code }) => ({
					field: fieldOf(pointer),
					message,
					...(code === undefined ? {} : { code })
				}))
			});
		if (fault instanceof Conflict) return fail(409, { mend: [{ field: '', message: fault.message }] });
		return refuseWith(event, fault);
	}
};
