import { json } from '@sveltejs/kit';
import { z } from 'zod';
import { modelInputSchema, taken } from '$lib/domain/register-input';
import { matchesFilter, modelFilterSchema } from '$lib/domain/register-filter';
import { forms } from '$lib/domain/references';
import { api, readJson } from '$lib/server/http/api';
import { registerModel } from '$lib/server/register/model';
import { registerTable } from '$lib/server/runs/register-table';
import type { RequestHandler } from './$types';

const pageSchema = z.object({
	limit: z.coerce.number<string>('A limit is a number.').int().min(1).max(1000).default(100),
	after: z.string().regex(forms.model, 'Write the last reference seen, such as M-014.').optional()
});

/** Models, ordered by reference, a page at a time: `?tier=&owner=&state=&verdict=&due=&limit=&after=`. */
export const GET: RequestHandler = (event) =>
	api(
		event,
		(ctx, actor) => {
			const asked = Object.fromEntries(event.url.searchParams);
			const filter = taken(modelFilterSchema, asked);
			const { limit, after } = taken(pageSchema, asked);
			const number = (ref: string): number => Number(ref.slice(2));
			const found = registerTable(ctx, actor)
				.filter((model) => matchesFilter(model, filter))
				.filter(({ ref }) => after === undefined || number(ref) > number(after))
				.sort((a, b) => number(a.ref) - number(b.ref));
			const models = found.slice(0, limit);
			return { models, ...(found.length > limit && { next: models.at(-1)!.ref }) };
		},
		{ scope: 'read' }
	);

/** Registers a model. */
export const POST: RequestHandler = (event) =>
	api(
		event,
		async (ctx, actor) => {
			const ref = registerModel(ctx, actor, await readJson(event, modelInputSchema));
			return json({ ref }, { status: 201, headers: { location: `/api/v1/models/${ref}` } });
		},
		{ scope: 'write' }
	);
