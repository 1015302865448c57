import { redirect, type ActionFailure, type RequestEvent } from '@sveltejs/kit';
import { superValidate, type SuperValidated } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { takeStepUp } from '$lib/server/auth/step-up';
import { submit } from '$lib/server/http/submit';
import { actWords } from '$lib/server/people/act-words';
import { perform, prepare, type Outcome } from '$lib/server/people/perform';
import type { StatementView } from '$lib/ui/step-up';
import { actForm, actOf, besideOf, fieldsOf, type ActForm } from './act-form';

type Answer<T> = T | ActionFailure<{ form: SuperValidated<ActForm> }>;

/** First half of a signed act: what was typed is checked, and the statement comes back to be read and signed. */
export const prepareAct = async (event: RequestEvent): Promise<Answer<{ statement: StatementView }>> => {
	const form = await superValidate(event.request, zod4(actForm));
	return submit(event, form, async (ctx, actor, data) => {
		const act = actOf(data);
		const beside = besideOf(data);
		const { challenge, code, options, payload } = await prepare(ctx, actor, act, beside);
		const words = actWords(ctx, act, payload, beside);
		return { statement: { challenge, code, words, options, fields: fieldsOf(data) } };
	});
};

const sent = (data: FormData, name: string): string => {
	const value = data.get(name);
	return typeof value === 'string' ? value : '';
};

/**
 * Second half: the signature is verified and the act done. What can be shown only once comes back with the answer;
 * everything else ends in a redirect.
 */
export const signAct = async (event: RequestEvent): Promise<Answer<{ outcome: Outcome }>> => {
	const data = await event.request.formData();
	const form = await superValidate(data, zod4(actForm));
	const answer = await submit(event, form, async (ctx, actor, typed) => {
		const signed = await takeStepUp(ctx, actor, {
			challenge: sent(data, 'challenge'),
			response: sent(data, 'response')
		});
		return { outcome: perform(ctx, actor, actOf(typed), signed, besideOf(typed)) };
	});
	if ('outcome' in answer && answer.outcome.kind === 'done') redirect(303, event.url.pathname);
	return answer;
};
