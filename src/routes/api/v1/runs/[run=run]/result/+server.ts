import { api } from '$lib/server/http/api';
import { resultOf } from '$lib/server/runs/run-view';
import type { RequestHandler } from './$types';

/** The whole result of a finished run. */
export const GET: RequestHandler = (event) =>
	api(event, (ctx, actor) => resultOf(ctx, actor, event.params.run), { scope: 'read' });
