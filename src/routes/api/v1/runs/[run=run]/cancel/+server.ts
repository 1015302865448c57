import { api } from '$lib/server/http/api';
import { cancelRun } from '$lib/server/runs/cancel';
import type { RequestHandler } from './$types';

/** Cancels a run that has not ended. */
export const POST: RequestHandler = (event) =>
	api(
		event,
		(ctx, actor) => {
			// No more than this: a token that may run need not be one that may read.
			const { run } = event.params;
			cancelRun(ctx, actor, run);
			return { run, state: 'cancelled' };
		},
		{ scope: 'run' }
	);
