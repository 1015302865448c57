import { json } from '@sveltejs/kit';
import { vintageInputSchema, type VintageInput } from '$lib/domain/lineage-input';
import { api, readJson } from '$lib/server/http/api';
import { confirmVintage } from '$lib/server/lineage/confirm';
import { dataOfModel } from '$lib/server/lineage/vintage-view';
import type { RequestHandler } from './$types';

/** Datasets a model may use, each with its vintages, newest first. */
export const GET: RequestHandler = (event) =>
	api(event, (ctx, actor) => ({ datasets: dataOfModel(ctx, actor, event.params.model) }), { scope: 'read' });

/** Confirms an upload with the lineage of its columns. */
export const POST: RequestHandler = (event) =>
	api(
		event,
		async (ctx, actor) => {
			const input = (await readJson(event, vintageInputSchema)) as VintageInput;
			const ref = await confirmVintage(ctx, actor, event.params.model, input);
			return json({ ref }, { status: 201, headers: { location: `/api/v1/vintages/${ref}` } });
		},
		{ scope: 'data' }
	);
