import { redirect } from '@sveltejs/kit';
import { superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { z } from 'zod';
import { scopes } from '$lib/domain/actor';
import { takeStepUp } from '$lib/server/auth/step-up';
import { serve } from '$lib/server/http/serve';
import { submit } from '$lib/server/http/submit';
import { accountOf, endOwnSession } from '$lib/server/people/account';
import { addPasskey, receivePasskey } from '$lib/server/people/passkeys';
import { prepareAct, signAct } from '../people/signing';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = (event) =>
	serve(event, (ctx, actor) => ({
		account: accountOf(ctx, actor),
		seat: actor.means === 'seat',
		recovery: actor.means === 'recovery',
		scopes
	}));

const made = z.object({ response: z.string().min(1, 'Make the passkey first.') });
const signed = z.object({ challenge: z.string(), response: z.string() });
const ending = z.object({ session: z.string() });

export const actions: Actions = {
	prepare: prepareAct,
	sign: signAct,
	receive: async (event) => {
		const form = await superValidate(event.request, zod4(made));
		return submit(event, form, async (ctx, actor, { response }) => {
			const request = await receivePasskey(ctx, actor, response);
			if (!request) redirect(303, '/account');
			const { challenge, code, options } = request;
			const words = ['You add the passkey that was just made to your account.', 'Your other sessions end.'];
			return { adding: { challenge, code, options, words, fields: [] } };
		});
	},
	add: async (event) => {
		const form = await superValidate(event.request, zod4(signed));
		const failed = await submit(event, form, async (ctx, actor, answer) =>
			addPasskey(ctx, actor, await takeStepUp(ctx, actor, answer))
		);
		if (failed) return failed;
		redirect(303, '/account');
	},
	'end-session': async (event) => {
		const form = await superValidate(event.request, zod4(ending));
		const failed = await submit(event, form, (ctx, actor, { session }) => endOwnSession(ctx, actor, session));
		if (failed) return failed;
		redirect(303, '/account');
	}
};
