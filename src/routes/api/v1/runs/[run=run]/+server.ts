import { api } from '$lib/server/http/api';
import { runOf } from '$lib/server/runs/run-view';
import type { RequestHandler } from './$types';

/** A run: what was asked, its state, how far it is. */
export const GET: RequestHandler = (event) =>
	api(event, (ctx, actor) => runOf(ctx, actor, event.params.run), { scope: 'read' });
