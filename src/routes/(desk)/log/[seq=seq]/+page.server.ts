import { entryView } from '$lib/server/exports/log-view';
import { serve } from '$lib/server/http/serve';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = (event) =>
	serve(event, (ctx, actor) => {
		const { checkpoint, ...view } = entryView(ctx, actor, Number(event.params.seq));
		return {
			...view,
			checkpoint: {
				size: checkpoint.size,
				at: checkpoint.at,
				root: checkpoint.root.toString('hex'),
				note: checkpoint.note
			}
		};
	});
