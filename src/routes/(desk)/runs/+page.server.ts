import { redirect } from '@sveltejs/kit';
import { fail } from '@sveltejs/kit';
import { z } from 'zod';
import { Conflict } from '$lib/domain/faults';
import { purposes } from '$lib/domain/permission-table';
import { forms } from '$lib/domain/references';
import { refuseWith } from '$lib/server/http/faults';
import { serve, signedIn } from '$lib/server/http/serve';
import { allow } from '$lib/server/people/allow';
import { listModels } from '$lib/server/register/model-list';
import { cancelRun } from '$lib/server/runs/cancel';
import { listRuns } from '$lib/server/runs/run-list';
import type { Actions, PageServerLoad } from './$types';

const states = ['requested', 'finished', 'failed', 'cancelled'] as const;

/** The parameters of the address; what makes no sense is left out, as a list of everything serves better than an error. */
const filterSchema = z.object({
	model: z.string().regex(forms.model).optional().catch(undefined),
	purpose: z.enum(purposes).optional().catch(undefined),
	state: z.enum(states).optional().catch(undefined),
	before: z.string().regex(forms.run).optional().catch(undefined)
});

export const load: PageServerLoad = (event) =>
	serve(event, (ctx, actor) => {
		event.depends('keelbook:runs');
		allow(ctx, ctx.read, actor, 'register.read');
		const filter = filterSchema.parse(Object.fromEntries(event.url.searchParams));
		const page = listRuns(ctx, actor, { ...filter, limit: 50 });
		const models = listModels(ctx, actor)
			.filter(({ whole }) => whole !== undefined)
			.map(({ ref, name }) => ({ ref, name }));
		return {
			...page,
			models,
			names: Object.fromEntries(models.map(({ ref, name }) => [ref, name])),
			purposes,
			states,
			unfinished: page.runs.some(({ state }) => state === 'queued' || state === 'running')
		};
	});

export const actions: Actions = {
	/** Cancels a run and goes to its page. */
	cancel: async (event) => {
		const run = String((await event.request.formData()).get('run') ?? '');
		try {
			cancelRun(event.locals.ctx, signedIn(event), run);
		} catch (fault) {
			if (fault instanceof Conflict) return fail(409, { said: fault.message });
			return refuseWith(event, fault);
		}
		redirect(303, `/runs/${run}`);
	}
};
