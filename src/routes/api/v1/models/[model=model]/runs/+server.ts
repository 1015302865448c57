import { json } from '@sveltejs/kit';
import { z } from 'zod';
import { Invalid } from '$lib/domain/faults';
import { parent } from '$lib/domain/references';
import { purposes } from '$lib/domain/permission-table';
import { overrideSchema } from '$lib/domain/run';
import { api, readJson } from '$lib/server/http/api';
import { requestRun } from '$lib/server/runs/request';
import type { RequestHandler } from './$types';

const bodySchema = z.strictObject({
	version: z.string(),
	vintage: z.string(),
	purpose: z.enum(purposes),
	settings: z.array(overrideSchema).optional(),
	seed: z.int().min(0).max(4294967295).optional()
});

/** Starts a run: 202 with the address where its state is. */
export const POST: RequestHandler = (event) =>
	api(
		event,
		async (ctx, actor) => {
			const { model } = event.params;
			const body = await readJson(event, bodySchema);
			if (parent(body.version) !== model)
				throw new Invalid([{ pointer: '/version', message: `Name a version of ${model}.` }]);
			const run = requestRun(ctx, actor, body);
			return json({ run }, { status: 202, headers: { location: `/api/v1/runs/${run}` } });
		},
		{ scope: 'run' }
	);
