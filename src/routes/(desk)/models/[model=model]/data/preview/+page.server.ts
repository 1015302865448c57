import { fail, redirect } from '@sveltejs/kit';
import { confirmVintage } from '$lib/server/lineage/confirm';
import { previewView } from '$lib/server/lineage/preview-view';
import { discardUpload } from '$lib/server/lineage/upload';
import { serve } from '$lib/server/http/serve';
import { modelHeader } from '$lib/server/register/model-sheet';
import type { Actions, PageServerLoad } from './$types';
import { mendable } from '../mendable';
import { choicesOf, inputOf, typedOf } from './confirm-form';

export const load: PageServerLoad = (event) =>
	serve(event, async (ctx, actor) => {
		const { model } = event.params;
		const { searchParams } = event.url;
		const dataset = searchParams.get('dataset');
		const view = await previewView(ctx, actor, {
			model,
			upload: searchParams.get('upload') ?? '',
			choices: choicesOf(searchParams),
			...(dataset ? { dataset } : {})
		});
		return { ...view, model: { ref: model, name: modelHeader(ctx, actor, model).name } };
	});

export const actions: Actions = {
	confirm: async (event) => {
		const { model } = event.params;
		const data = await event.request.formData();
		const typed = typedOf(data);
		const answer = await mendable(event, async (ctx, actor) => ({
			vintage: await confirmVintage(
				ctx,
				actor,
				model,
				inputOf(typed, {
					upload: event.url.searchParams.get('upload') ?? '',
					sha256: String(data.get('sha256') ?? ''),
					choices: choicesOf(event.url.searchParams)
				})
			)
		}));
		if (!('vintage' in answer)) return fail(answer.status, { mend: answer.data.mend, typed });
		redirect(303, `/data/${answer.vintage}`);
	},
	discard: async (event) => {
		const { model } = event.params;
		const answer = await mendable(event, (ctx, actor) => {
			discardUpload(ctx, actor, { model, upload: event.url.searchParams.get('upload') ?? '' });
			return { discarded: true };
		});
		if (!('discarded' in answer)) return answer;
		redirect(303, `/models/${model}/data`);
	}
};
