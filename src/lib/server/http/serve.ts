import { error, type RequestEvent } from '@sveltejs/kit';
import type { Actor } from '$lib/domain/actor';
import type { Ctx } from '$lib/server/context';
import { refuseWith } from './faults';

/** Who asks; the guard in hooks has let nobody else through, so null here is a fault of ours. */
export const signedIn = (event: RequestEvent): Actor => event.locals.actor ?? error(401, 'Sign in first.');

/** Runs a reading for a page: known faults become error pages, refusals are entered. */
export const serve = async <T>(
	event: RequestEvent,
	work: (ctx: Ctx, actor: Actor) => T | Promise<T>
): Promise<T> => {
	const actor = signedIn(event);
	try {
		return await work(event.locals.ctx, actor);
	} catch (fault) {
		return refuseWith(event, fault);
	}
};
