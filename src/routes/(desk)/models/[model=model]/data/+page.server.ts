import { redirect } from '@sveltejs/kit';
import { Invalid } from '$lib/domain/faults';
import { uploadIssue } from '$lib/domain/lineage-codes';
import { attachDataset } from '$lib/server/lineage/attach';
import { storeUpload } from '$lib/server/lineage/upload';
import { dataOfModel } from '$lib/server/lineage/vintage-view';
import { serve } from '$lib/server/http/serve';
import { may } from '$lib/server/people/allow';
import { modelHeader } from '$lib/server/register/model-sheet';
import type { Actions, PageServerLoad } from './$types';
import { mendable } from './mendable';

export const load: PageServerLoad = (event) =>
	serve(event, (ctx, actor) => {
		const { model } = event.params;
		const datasets = dataOfModel(ctx, actor, model);
		return {
			model: { ref: model, name: modelHeader(ctx, actor, model).name },
			mayStore: may(ctx, ctx.read, actor, 'dataset.store', { model }),
			datasets: datasets.map(({ ref, name, models, vintages }) => ({
				ref,
				name,
				models,
				vintages: vintages.map(
					({ ref: vintage, vintageDate, from, to, observations, frequency, columns, at }) => ({
						ref: vintage,
						vintageDate,
						from,
						to,
						observations,
						frequency,
						used: columns.filter(({ role }) => role !== 'left-out').map(({ name: column }) => column),
						at
					})
				)
			}))
		};
	});

/** The one file of a multipart form. */
const fileOf = async (request: Request): Promise<File> => {
	let data: FormData;
	try {
		data = await request.formData();
	} catch {
		throw new Invalid([uploadIssue('request', ['The form could not be read; send it again'])]);
	}
	const files = data.getAll('file');
	const [file] = files;
	if (files.length !== 1 || !(file instanceof File))
		throw new Invalid([uploadIssue('request', ['Send one file at a time'], { pointer: '/file' })]);
	if (file.name === '' && file.size === 0)
		throw new Invalid([uploadIssue('request', ['Choose a file'], { pointer: '/file' })]);
	return file;
};

export const actions: Actions = {
	upload: async (event) => {
		const { model } = event.params;
		const answer = await mendable(event, async (ctx, actor) => {
			const file = await fileOf(event.request);
			const bytes = new Uint8Array(await file.arrayBuffer());
			return storeUpload(ctx, actor, { model, bytes, fileName: file.name });
		});
		if (!('upload' in answer)) return answer;
		redirect(303, `/models/${model}/data/preview?upload=${answer.upload}`);
	},
	attach: async (event) => {
		const { model } = event.params;
		const dataset = String((await event.request.formData()).get('dataset') ?? '').trim();
		const answer = await mendable(event, (ctx, actor) => {
			attachDataset(ctx, actor, { model, dataset });
			return { attached: dataset };
		});
		if (!('attached' in answer)) return answer;
		redirect(303, `/models/${model}/data`);
	}
};
