import { json } from '@sveltejs/kit';
import { z } from 'zod';
import { declarationsSchema } from '$lib/domain/register-input';
import { api, readJson } from '$lib/server/http/api';
import { declareSigns, sides } from '$lib/server/register/signs';
import { signsOf } from '$lib/server/register/signs-view';
import type { RequestHandler } from './$types';

const bodySchema = z.strictObject({ side: z.enum(sides).default('owner'), drivers: declarationsSchema });

/** Declared signs and plausible ranges, those in force and every earlier one. */
export const GET: RequestHandler = (event) =>
	api(event, (ctx, actor) => signsOf(ctx, actor, event.params.model), { scope: 'read' });

/** Declares signs and ranges; claims and runs come after. */
export const POST: RequestHandler = (event) =>
	api(
		event,
		async (ctx, actor) => {
			const { model } = event.params;
			const n = declareSigns(ctx, actor, { model, ...(await readJson(event, bodySchema)) });
			return json({ model, n }, { status: 201, headers: { location: `/api/v1/models/${model}/signs` } });
		},
		{ scope: 'data' }
	);
