import { redirect, type RequestEvent } from '@sveltejs/kit';
import { fail, superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { z } from 'zod';
import type { Actor, PersonId } from '$lib/domain/actor';
import { Conflict, Invalid } from '$lib/domain/faults';
import { takeStepUp } from '$lib/server/auth/step-up';
import type { Ctx } from '$lib/server/context';
import { refuseWith } from '$lib/server/http/faults';
import { serve, signedIn } from '$lib/server/http/serve';
import { submit } from '$lib/server/http/submit';
import { editModel } from '$lib/server/register/model';
import { assignValidator, releaseValidator } from '$lib/server/register/parties';
import { changeTeam, prepareTeamChange, type TeamChange } from '$lib/server/register/team';
import { agreeOverride, confirmTier, proposeOverride } from '$lib/server/register/tier';
import type { Actions, PageServerLoad } from './$types';
import { sheetPage } from './sheet';

const editForm = z.object({
	name: z.string(),
	purpose: z.string(),
	portfolio: z.string(),
	/** Separated by commas. */
	uses: z.string(),
	materiality: z.string(),
	complexity: z.string()
});

export const load: PageServerLoad = (event) =>
	serve(event, async (ctx, actor) => {
		const page = sheetPage(ctx, actor, event.params.model);
		const sheet = page.whole?.sheet;
		const score = (question: string): string =>
			String(sheet?.answers.find((answer) => answer.question === question)?.score ?? '');
		return {
			...page,
			edit: await superValidate(
				{
					name: sheet?.name ?? '',
					purpose: sheet?.purpose ?? '',
					portfolio: sheet?.portfolio ?? '',
					uses: sheet?.uses.join(', ') ?? '',
					materiality: score('materiality'),
					complexity: score('complexity')
				},
				zod4(editForm),
				{ errors: false }
			)
		};
	});

type Sheet = RequestEvent<{ model: string }>;

/** A small act of one button: what cannot be done now comes back as a sentence beside it. */
const act = async (event: Sheet, work: (ctx: Ctx, actor: Actor, sent: FormData) => void) => {
	const sent = await event.request.formData();
	const actor = signedIn(event);
	try {
		work(event.locals.ctx, actor, sent);
	} catch (fault) {
		if (fault instanceof Invalid || fault instanceof Conflict) return fail(400, { said: fault.message });
		return refuseWith(event, fault);
	}
	return redirect(303, event.url.pathname);
};

const text = (sent: FormData, name: string): string => String(sent.get(name) ?? '');

export const actions: Actions = {
	edit: async (event) => {
		const form = await superValidate(event.request, zod4(editForm));
		const answer = await submit(event, form, (ctx, actor, { uses, ...said }) => {
			editModel(ctx, actor, event.params.model, {
				...said,
				uses: uses
					.split(',')
					.map((use) => use.trim())
					.filter((use) => use !== ''),
				materiality: Number(said.materiality),
				complexity: Number(said.complexity)
			});
			return true as const;
		});
		if (answer !== true) return answer;
		redirect(303, event.url.pathname);
	},
	assign: (event) =>
		act(event, (ctx, actor, sent) =>
			assignValidator(ctx, actor, { model: event.params.model, person: text(sent, 'person') as PersonId })
		),
	release: (event) =>
		act(event, (ctx, actor, sent) =>
			releaseValidator(ctx, actor, { model: event.params.model, person: text(sent, 'person') as PersonId })
		),
	confirm: (event) =>
		act(event, (ctx, actor, sent) =>
			confirmTier(ctx, actor, { model: event.params.model, tier: Number(text(sent, 'tier')) })
		),
	override: (event) =>
		act(event, (ctx, actor, sent) =>
			proposeOverride(ctx, actor, {
				model: event.params.model,
				tier: Number(text(sent, 'tier')),
				reason: text(sent, 'reason')
			})
		),
	/** Builds the statement that an admin signs to appoint or end an owner or developer. */
	prepare: async (event) => {
		const sent = await event.request.formData();
		const actor = signedIn(event);
		const { ctx } = event.locals;
		const kind: TeamChange = text(sent, 'kind') === 'end' ? 'end' : 'start';
		const appointment = {
			model: event.params.model,
			person: text(sent, 'person'),
			relation: text(sent, 'relation') as 'owner'
		};
		try {
			const { challenge, code, options } = await prepareTeamChange(ctx, actor, kind, appointment);
			const name = ctx.people.names([appointment.person as PersonId]).get(appointment.person) ?? '';
			const words = [
				kind === 'start'
					? `I appoint ${name} as ${appointment.relation} of ${appointment.model}.`
					: `${name} is no longer ${appointment.relation} of ${appointment.model}.`
			];
			return { statement: { challenge, code, options, words, fields: [{ name: 'kind', value: kind }] } };
		} catch (fault) {
			if (fault instanceof Invalid || fault instanceof Conflict) return fail(400, { said: fault.message });
			return refuseWith(event, fault);
		}
	},
	sign: async (event) => {
		const sent = await event.request.formData();
		const actor = signedIn(event);
		const { ctx } = event.locals;
		try {
			const answer = { challenge: text(sent, 'challenge'), response: text(sent, 'response') };
			const signed = await takeStepUp(ctx, actor, answer);
			changeTeam(ctx, actor, text(sent, 'kind') === 'end' ? 'end' : 'start', signed);
		} catch (fault) {
			if (fault instanceof Invalid || fault instanceof Conflict) return fail(400, { said: fault.message });
			return refuseWith(event, fault);
		}
		redirect(303, event.url.pathname);
	},
	agree: (event) => act(event, (ctx, actor) => agreeOverride(ctx, actor, event.params.model))
};
