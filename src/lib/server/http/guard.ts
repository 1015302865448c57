import type { RequestEvent } from '@sveltejs/kit';
import type { Actor } from '$lib/domain/actor';
import type { Ctx } from '$lib/server/context';
import { problem } from './problem';
import { bearer, sameOrigin } from './same-origin';

/** Who asks, by cookie or by token: null when nobody is signed in. */
export type Identify = (ctx: Ctx, event: RequestEvent) => Promise<Actor | null> | Actor | null;

/** Why a request goes no further, as an answer or as the page to go to instead. */
export type Stopped = { readonly response: Response } | { readonly location: string };

/** Paths that answer anyone, beside the route groups below. */
const open = new Set(['/healthz', '/readyz']);

type Group = 'door' | 'desk' | 'api' | 'open' | 'none';

/** The route group decides who may enter; a route in none is closed. */
const groupOf = (routeId: string | null): Group => {
	// No route: SvelteKit answers 404 itself.
	if (routeId === null || open.has(routeId)) return 'open';
	if (routeId.startsWith('/(door)')) return 'door';
	if (routeId.startsWith('/(desk)')) return 'desk';
	return routeId.startsWith('/api/') ? 'api' : 'none';
};

/** A sentence, in the dialect of the address: a problem document under /api, else plain text. */
const stop = ({ url }: RequestEvent, status: number, title: string, detail: string): Stopped => ({
	response: url.pathname.startsWith('/api/')
		? problem({ status, title, detail })
		: new Response(detail, { status })
});

const otherSite = 'This request came from another site; open the page again and repeat it.';

/** A token is for the API, and is sent alone: a cookie beside it would say who acts a second time. */
const tokenFault = (event: RequestEvent): Stopped | undefined => {
	if (!bearer(event.request)) return undefined;
	if (!event.url.pathname.startsWith('/api/'))
		return stop(event, 400, 'No token here', 'A token opens /api/v1 only.');
	return event.request.headers.has('cookie')
		? stop(event, 400, 'Two credentials', 'Send a token or a cookie, not both.')
		: undefined;
};

/** Identifies the asker and closes what is not open to them; by group, closed by default. */
export const guard = async (event: RequestEvent, identify: Identify): Promise<Stopped | undefined> => {
	const { ctx } = event.locals;
	const group = groupOf(event.route.id);
	const nowhere = event.route.id === null && event.url.pathname.startsWith('/api/');
	if (group === 'none' || nowhere) return stop(event, 404, 'Not found', 'There is no such page.');
	if (!sameOrigin(event.request, ctx.config.origin)) return stop(event, 403, 'Refused', otherSite);
	// A prefetch must not write the entry that a read of evidence makes.
	if (/prefetch/.test(event.request.headers.get('sec-purpose') ?? ''))
		return { response: new Response(null, { status: 204 }) };
	const fault = tokenFault(event);
	if (fault) return fault;
	event.locals.actor = group === 'open' ? null : await identify(ctx, event);
	if (event.locals.actor) return undefined;
	if (group === 'desk')
		return { location: `/sign-in?next=${encodeURIComponent(event.url.pathname + event.url.search)}` };
	if (group === 'api')
		return {
			response: problem({ status: 401, title: 'Not signed in', detail: 'Send a bearer token, or sign in.' })
		};
	return undefined;
};
