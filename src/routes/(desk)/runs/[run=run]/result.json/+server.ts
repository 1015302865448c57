import { canonical } from '$lib/chain/canonical';
import { serve } from '$lib/server/http/serve';
import { resultOf } from '$lib/server/runs/run-view';
import type { RequestHandler } from './$types';

/** The result as it is stored: canonical JSON, so that its bytes hash to the digest in the log. */
export const GET: RequestHandler = (event) =>
	serve(event, (ctx, actor) => {
		const { run } = event.params;
		return new Response(canonical(resultOf(ctx, actor, run)), {
			headers: {
				'content-type': 'application/json',
				'content-disposition': `attachment; filename="${run}-result.json"`
			}
		});
	});
