import { json } from '@sveltejs/kit';
import { z } from 'zod';
import { api, readJson } from '$lib/server/http/api';
import { draftVersion, submitSpecification } from '$lib/server/register/version';
import { versionsOfModel } from '$lib/server/register/version-view';
import type { RequestHandler } from './$types';

const bodySchema = z.strictObject({
	specification: z.unknown(),
	/** Why the model gets another version; needed from the second on. */
	reason: z.string().optional(),
	predecessor: z.string().optional(),
	/** Keeps it a draft, which can still be revised. */
	draft: z.boolean().default(false)
});

/** Every version of a model, oldest first. */
export const GET: RequestHandler = (event) =>
	api(event, (ctx, actor) => ({ versions: versionsOfModel(ctx, actor, event.params.model) }), {
		scope: 'read'
	});

/** Submits a specification as the next version, or keeps it as a draft. */
export const POST: RequestHandler = (event) =>
	api(
		event,
		async (ctx, actor) => {
			const { draft, ...body } = await readJson(event, bodySchema);
			const { model } = event.params;
			const ref = (draft ? draftVersion : submitSpecification)(ctx, actor, { model, ...body });
			return json({ ref }, { status: 201, headers: { location: `/api/v1/versions/${ref}` } });
		},
		{ scope: 'data' }
	);
