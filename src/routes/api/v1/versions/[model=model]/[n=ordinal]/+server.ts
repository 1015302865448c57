import { part } from '$lib/domain/references';
import { api } from '$lib/server/http/api';
import { versionOf } from '$lib/server/register/version-view';
import type { RequestHandler } from './$types';

/** A version with its whole specification. */
export const GET: RequestHandler = (event) =>
	api(event, (ctx, actor) => versionOf(ctx, actor, part(event.params.model, Number(event.params.n))), {
		scope: 'read'
	});
