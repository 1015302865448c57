import { fail, redirect, type RequestEvent } from '@sveltejs/kit';
import { draftOf, editRows } from '$lib/domain/register-draft';
import { ordinal } from '$lib/domain/references';
import { refuseWith } from '$lib/server/http/faults';
import { serve, signedIn } from '$lib/server/http/serve';
import { vintagesOfModel } from '$lib/server/lineage/read';
import { modelSheet } from '$lib/server/register/model-sheet';
import { openVersionForm, saveVersionForm, type FormOrigin } from '$lib/server/register/version-form';
import type { Actions, PageServerLoad } from './$types';

/** `?revise=3` or `?from=3`; anything else begins from the newest version. */
const originOf = (url: URL): FormOrigin => {
	for (const kind of ['revise', 'from'] as const) {
		const given = url.searchParams.get(kind);
		if (given !== null && /^[1-9]\d{0,5}$/.test(given)) return { kind, ordinal: Number(given) };
	}
	return { kind: 'new' };
};

export const load: PageServerLoad = (event) =>
	serve(event, (ctx, actor) => {
		const { model } = event.params;
		const origin = originOf(event.url);
		const vintages = vintagesOfModel(ctx.read, model);
		const columns = vintages.flatMap(({ ref, columns: all }) =>
			all.filter(({ role }) => role !== 'left-out').map(({ name, unit }) => ({ name, unit, vintage: ref }))
		);
		const { ref, name, may } = modelSheet(ctx, actor, model);
		return {
			ref,
			name,
			kind: origin.kind,
			// Kept in the address of every action of the form.
			query: origin.kind === 'new' ? '' : `&${origin.kind}=${origin.ordinal}`,
			maySubmit: may.submit,
			...openVersionForm(ctx, actor, model, origin, vintages[0]),
			vintage: vintages[0]?.ref,
			columns: columns.filter((column, i) => columns.findIndex((each) => each.name === column.name) === i)
		};
	});

const draftSent = async (event: RequestEvent) => {
	const sent = await event.request.formData();
	return { draft: draftOf(sent), edit: String(sent.get('edit') ?? ''), save: String(sent.get('save') ?? '') };
};

export const actions: Actions = {
	/** Adds or removes a row, or shows the equation and the claimed table again; nothing is stored. */
	edit: async (event) => {
		const { draft, edit } = await draftSent(event);
		return { draft: editRows(draft, edit), issues: [] };
	},
	save: async (event) => {
		const { draft, save } = await draftSent(event);
		const { ctx } = event.locals;
		const { model } = event.params;
		let answer;
		try {
			answer = saveVersionForm(ctx, signedIn(event), model, originOf(event.url), {
				draft,
				submit: save === 'submit'
			});
		} catch (fault) {
			return refuseWith(event, fault);
		}
		if (!('saved' in answer)) return fail(400, { draft: answer.draft, issues: [...answer.issues] });
		redirect(303, `/models/${model}/versions/${ordinal(answer.saved)}`);
	}
};
