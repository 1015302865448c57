import { z } from 'zod';
import { forms } from '$lib/domain/references';
import { purposes } from '$lib/domain/permission-table';
import { taken } from '$lib/domain/register-input';
import { api } from '$lib/server/http/api';
import { listRuns } from '$lib/server/runs/run-list';
import type { RequestHandler } from './$types';

const querySchema = z.object({
	model: z.string().regex(forms.model, 'Write a model such as M-014.').optional(),
	version: z.string().regex(forms.version, 'Write a version such as M-014/3.').optional(),
	vintage: z.string().regex(forms.vintage, 'Write a vintage such as D-0051/2.').optional(),
	purpose: z.enum(purposes).optional(),
	state: z.enum(['requested', 'finished', 'failed', 'cancelled']).optional(),
	before: z.string().regex(forms.run, 'Write the last run seen, such as R-0207.').optional(),
	limit: z.coerce.number<string>('A limit is a number.').int().min(1).max(200).default(50)
});

/** Runs, newest first, a page at a time: `?model=&version=&vintage=&purpose=&state=&before=&limit=`. */
export const GET: RequestHandler = (event) =>
	api(
		event,
		(ctx, actor) => {
			const asked = taken(querySchema, Object.fromEntries(event.url.searchParams));
			return listRuns(ctx, actor, asked);
		},
		{ scope: 'read' }
	);
