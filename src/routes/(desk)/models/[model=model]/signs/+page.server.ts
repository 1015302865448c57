import { fail, redirect } from '@sveltejs/kit';
import { superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { Invalid } from '$lib/domain/faults';
import { serve } from '$lib/server/http/serve';
import { submit } from '$lib/server/http/submit';
import { modelSheet } from '$lib/server/register/model-sheet';
import { declareSigns } from '$lib/server/register/signs';
import { signsOf } from '$lib/server/register/signs-view';
import type { Actions, PageServerLoad } from './$types';
import { driversOf, editRows, issuesInForm, signForm, typedRows } from './sign-form';

export const load: PageServerLoad = (event) =>
	serve(event, async (ctx, actor) => {
		const { model } = event.params;
		const { name, ref, may } = modelSheet(ctx, actor, model);
		const side = may.declare ? ('owner' as const) : ('validator' as const);
		const empty = { side, series: [''], sign: ['+'], low: [''], high: [''], rationale: [''] };
		return {
			ref,
			name,
			signs: signsOf(ctx, actor, model),
			mayDeclare: may.declare || may.declareAsValidator,
			side,
			form: await superValidate(empty, zod4(signForm), { errors: false })
		};
	});

export const actions: Actions = {
	/** Adds or removes a row of the form; nothing is stored. */
	rows: async (event) => {
		const data = await event.request.formData();
		const form = await superValidate(data, zod4(signForm));
		form.data = editRows(form.data, String(data.get('edit') ?? ''));
		return { form };
	},
	declare: async (event) => {
		const { model } = event.params;
		const form = await superValidate(event.request, zod4(signForm));
		const rows = typedRows(form.data);
		const answer = await submit(event, form, (ctx, actor, data) => {
			try {
				return declareSigns(ctx, actor, { model, side: data.side, drivers: driversOf(data, rows) });
			} catch (fault) {
				throw fault instanceof Invalid ? new Invalid(issuesInForm(fault.issues, rows)) : fault;
			}
		});
		if (typeof answer !== 'number') return answer ?? fail(400, { form });
		redirect(303, `/models/${model}/signs`);
	}
};
