import { signOut } from '$lib/server/people/sign-in';
import { letOut } from '../visitor';
import type { RequestHandler } from './$types';

export const POST: RequestHandler = (event) => {
	const { ctx, actor } = event.locals;
	if (actor) signOut(ctx, actor);
	letOut(event);
	return new Response(null, {
		status: 303,
		headers: { location: '/sign-in', 'clear-site-data': '"cache", "storage"' }
	});
};
