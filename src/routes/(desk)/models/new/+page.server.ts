import { redirect } from '@sveltejs/kit';
import { superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { z } from 'zod';
import { serve } from '$lib/server/http/serve';
import { submit } from '$lib/server/http/submit';
import { allow } from '$lib/server/people/allow';
import { adoptedPolicy } from '$lib/server/policy/policy';
import { developerCandidates } from '$lib/server/register/candidates';
import { registerModel } from '$lib/server/register/model';
import type { Actions, PageServerLoad } from './$types';
import { offeredUses } from '../uses';

/** What the form holds as typed; the register judges it and names the field. */
const formSchema = z.object({
	name: z.string(),
	purpose: z.string(),
	portfolio: z.string(),
	uses: z.array(z.string()),
	otherUse: z.string(),
	materiality: z.string(),
	complexity: z.string(),
	developers: z.array(z.string())
});

export const load: PageServerLoad = (event) =>
	serve(event, async (ctx, actor) => {
		allow(ctx, ctx.read, actor, 'model.register');
		const { policy, release } = adoptedPolicy(ctx, ctx.read);
		return {
			form: await superValidate(zod4(formSchema)),
			questions: policy.questions.map(({ id, asks, answers }) => ({ id, asks, answers })),
			tiers: policy.tiers.map(({ tier, from, review }) => ({
				tier,
				from: Number(from.value),
				months: Number(review.value)
			})),
			release,
			people: developerCandidates(ctx, actor),
			uses: offeredUses
		};
	});

export const actions: Actions = {
	default: async (event) => {
		const form = await superValidate(event.request, zod4(formSchema));
		const answer = await submit(event, form, (ctx, actor, { otherUse, uses, ...said }) =>
			registerModel(ctx, actor, {
				...said,
				materiality: Number(said.materiality),
				complexity: Number(said.complexity),
				uses: [...uses, ...otherUse.split(',')].map((use) => use.trim()).filter((use) => use !== '')
			})
		);
		if (typeof answer !== 'string') return answer;
		redirect(303, `/models/${answer}`);
	}
};
