import { download } from '$lib/server/exports/download';
import { entryView } from '$lib/server/exports/log-view';
import { Conflict } from '$lib/domain/faults';
import { serve } from '$lib/server/http/serve';
import type { RequestHandler } from './$types';

/** The inclusion proof of an entry (C2SP tlog-proof v1). */
export const GET: RequestHandler = (event) =>
	serve(event, (ctx, actor) => {
		const { seq, proof } = entryView(ctx, actor, Number(event.params.seq));
		if (proof === undefined)
			throw new Conflict('No checkpoint covers this entry yet; one is signed within a minute.');
		return download(`E-${seq}.tlog-proof`, 'text/plain; charset=utf-8', proof);
	});
