import { readLogQuery } from '$lib/server/exports/log-query';
import { checkpointView, logPage, namedActors, type Cursor } from '$lib/server/exports/log-view';
import { serve } from '$lib/server/http/serve';
import { actorsOf, eventTypes } from '$lib/server/log/read';
import type { PageServerLoad } from './$types';

const cursorOf = (params: URLSearchParams): Cursor => {
	const place = (name: string): number | undefined =>
		/^\d{1,15}$/.test(params.get(name) ?? '') ? Number(params.get(name)) : undefined;
	const [below, above] = [place('below'), place('above')];
	return { ...(below !== undefined && { below }), ...(above !== undefined && { above }) };
};

export const load: PageServerLoad = (event) =>
	serve(event, (ctx, actor) => {
		const { searchParams } = event.url;
		const { filter, typed, issues } = readLogQuery(ctx.read, searchParams);
		const { root, ...checkpoint } = checkpointView(ctx, actor);
		const page = logPage(ctx, actor, filter, cursorOf(searchParams));
		// Who sees only some entries is not told who wrote the others.
		const actors = page.whole
			? actorsOf(ctx.read)
			: [...new Set(page.entries.map((entry) => entry.actor.id))];
		return {
			...page,
			typed,
			issues,
			types: eventTypes,
			actors: namedActors(ctx, actors),
			checkpoint: { ...checkpoint, root: root.toString('hex') }
		};
	});
