import { api } from '$lib/server/http/api';
import { cancelRun } from '$lib/server/runs/cancel';
import { runOf } from '$lib/server/runs/run-view';
import type { RequestHandler } from './$types';

/** Cancels a run that has not ended. */
export const POST: RequestHandler = (event) =>
	api(
		event,
		(ctx, actor) => {
			cancelRun(ctx, actor, event.params.run);
			return runOf(ctx, actor, event.params.run);
		},
		{ scope: 'run' }
	);
