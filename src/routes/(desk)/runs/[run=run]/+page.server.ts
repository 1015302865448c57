import { redirect } from '@sveltejs/kit';
import { superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { z } from 'zod';
import { purposes } from '$lib/domain/run';
import { serve } from '$lib/server/http/serve';
import { submit } from '$lib/server/http/submit';
import { cancelRun } from '$lib/server/runs/cancel';
import { requestRun } from '$lib/server/runs/request';
import { runOf } from '$lib/server/runs/run-view';
import type { Actions, PageServerLoad } from './$types';
import { runPage } from './run-page';

const rerunSchema = z.object({ purpose: z.enum(purposes) });

export const load: PageServerLoad = (event) =>
	serve(event, async (ctx, actor) => {
		event.depends('keelbook:run');
		return { ...runPage(ctx, actor, event.params.run), form: await superValidate(zod4(rerunSchema)) };
	});

export const actions: Actions = {
	cancel: async (event) => {
		await serve(event, (ctx, actor) => cancelRun(ctx, actor, event.params.run));
		redirect(303, `/runs/${event.params.run}`);
	},
	/** The same version, vintage, settings and seed once more, under a purpose the person names. */
	rerun: async (event) => {
		const form = await superValidate(event.request, zod4(rerunSchema));
		const answer = await submit(event, form, (ctx, actor, { purpose }) => {
			const { version, vintage, settings, seed } = runOf(ctx, actor, event.params.run);
			return requestRun(ctx, actor, { version, vintage, purpose, settings: [...settings], seed });
		});
		if (typeof answer !== 'string') return answer;
		redirect(303, `/runs/${answer}`);
	}
};
