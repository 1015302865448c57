import { serve } from '$lib/server/http/serve';
import { resultBytes } from '$lib/server/runs/run-view';
import type { RequestHandler } from './$types';

/** The exact bytes of the stored result: they hash to the digest that the run's entry names. */
export const GET: RequestHandler = (event) =>
	serve(event, (ctx, actor) => {
		const { run } = event.params;
		return new Response(new Uint8Array(resultBytes(ctx, actor, run)), {
			headers: {
				'content-type': 'application/json',
				'content-disposition': `attachment; filename="${run}-result.json"`
			}
		});
	});
