import { fail, redirect } from '@sveltejs/kit';
import { superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { z } from 'zod';
import { takeStepUp } from '$lib/server/auth/step-up';
import { serve } from '$lib/server/http/serve';
import { submit } from '$lib/server/http/submit';
import { confirmPolicy, prepareConfirmation } from '$lib/server/policy/adoption';
import { policyPage } from '$lib/server/policy/policy-view';
import type { StatementView } from '$lib/ui/step-up';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = (event) =>
	serve(event, (ctx, actor) => policyPage(ctx, actor, event.url.searchParams.get('policy') ?? undefined));

const proposalForm = z.object({ proposal: z.coerce.number<number>().int().min(0) });
const signedForm = proposalForm.extend({ challenge: z.string(), response: z.string() });

export const actions: Actions = {
	prepare: async (event) => {
		const form = await superValidate(event.request, zod4(proposalForm));
		return submit(event, form, async (ctx, actor, { proposal }) => {
			const { challenge, code, options } = await prepareConfirmation(ctx, actor, proposal);
			const statement: StatementView = {
				challenge,
				code,
				options,
				words: [
					`You adopt the policy proposed in E-${proposal}.`,
					'Runs requested from now on are judged by it; older results keep theirs.'
				],
				fields: [{ name: 'proposal', value: String(proposal) }]
			};
			return { statement };
		});
	},
	sign: async (event) => {
		const form = await superValidate(event.request, zod4(signedForm));
		if (!form.valid) return fail(400, { form });
		const failed = await submit(event, form, async (ctx, actor, { proposal, challenge, response }) =>
			confirmPolicy(ctx, actor, proposal, await takeStepUp(ctx, actor, { challenge, response }))
		);
		if (failed) return failed;
		redirect(303, '/policy');
	}
};
