import { checkpointView } from '$lib/server/exports/log-view';
import { api } from '$lib/server/http/api';
import type { RequestHandler } from './$types';

/** The newest signed head, and the key to check it with. */
export const GET: RequestHandler = (event) =>
	api(
		event,
		(ctx, actor) => {
			const { size, root, note, at, verifierKey } = checkpointView(ctx, actor);
			return { size, root: root.toString('base64'), at, note, verifierKey };
		},
		{ scope: 'read' }
	);
