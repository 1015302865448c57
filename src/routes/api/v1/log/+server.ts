import { strictLogQuery } from '$lib/server/exports/log-query';
import { entriesAfter } from '$lib/server/exports/log-view';
import { api } from '$lib/server/http/api';
import type { RequestHandler } from './$types';

/** Entries in the order they were written, 100 at a time: `?after=<next>` reads on. */
export const GET: RequestHandler = (event) =>
	api(event, (ctx, actor) => entriesAfter(ctx, actor, strictLogQuery(ctx.read, event.url.searchParams)), {
		scope: 'read'
	});
