import { part } from '$lib/domain/references';
import { serve } from '$lib/server/http/serve';
import { versionOf } from '$lib/server/register/version-view';
import type { RequestHandler } from './$types';

/** The specification as a file, such as `keelbook run --spec` reads. */
export const GET: RequestHandler = (event) =>
	serve(event, (ctx, actor) => {
		const { model, n } = event.params;
		const { specification } = versionOf(ctx, actor, part(model, Number(n)));
		return new Response(`${JSON.stringify(specification, null, 2)}\n`, {
			headers: {
				'content-type': 'application/json',
				'content-disposition': `attachment; filename="${model}-${n}.json"`
			}
		});
	});
