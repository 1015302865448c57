import { json } from '@sveltejs/kit';
import { Invalid } from '$lib/domain/faults';
import { choicesSchema, limits } from '$lib/domain/lineage';
import { forms } from '$lib/domain/references';
import { taken } from '$lib/domain/register-input';
import { api } from '$lib/server/http/api';
import { problem } from '$lib/server/http/problem';
import { glimpseOf } from '$lib/server/lineage/preview-view';
import { storeUpload, tooLarge } from '$lib/server/lineage/upload';
import type { RequestHandler } from './$types';

/**
 * Reads the body up to the limit; a declared length is not believed, and what is beyond is not read. The stream is left
 * and not cancelled: cancelling would end the connection before the answer is on it.
 */
const readBody = async (request: Request): Promise<Uint8Array | undefined> => {
	const reader = request.body?.getReader();
	const chunks: Uint8Array[] = [];
	let size = 0;
	for (;;) {
		const { done, value } = (await reader?.read()) ?? { done: true };
		if (done) return Buffer.concat(chunks);
		size += value.length;
		if (size > limits.bytes) return undefined;
		chunks.push(value);
	}
};

/** The answer to a file over the limit; the rest of it is not waited for. */
const overLimit = (): Response => {
	const issue = tooLarge();
	const response = problem({ status: 413, title: 'Too large', detail: issue.message, issues: [issue] });
	response.headers.set('connection', 'close');
	return response;
};

/** What the address says beside the file: its model, its name, choices of reading. */
const asked = (params: URLSearchParams) => {
	const { model = '', name = 'upload', ...rest } = Object.fromEntries(params);
	if (!forms.model.test(model))
		throw new Invalid([{ pointer: '/model', message: 'Name the model: ?model=M-014.' }]);
	const { headerRow, ...words } = rest;
	const choices = taken(
		choicesSchema,
		headerRow === undefined ? words : { ...words, headerRow: Number(headerRow) }
	);
	return { model, name, choices };
};

/** Takes the raw bytes of a CSV or XLSX file: `?model=M-014&name=q.csv`, and choices such as `&decimal=,`. */
export const POST: RequestHandler = (event) =>
	api(
		event,
		async (ctx, actor) => {
			const { model, name, choices } = asked(event.url.searchParams);
			const bytes = await readBody(event.request);
			if (!bytes) return overLimit();
			const { parsed, ...preview } = await storeUpload(ctx, actor, { model, bytes, fileName: name, choices });
			const table = parsed && {
				how: parsed.how,
				frequency: parsed.table.frequency,
				from: parsed.table.periods[0],
				to: parsed.table.periods.at(-1),
				observations: parsed.table.periods.length,
				notes: parsed.table.notes,
				leftOut: parsed.leftOut,
				...glimpseOf(parsed.table)
			};
			const { upload, sha256, ...rest } = preview;
			return json({ upload, sha256, preview: { ...rest, ...(table && { table }) } }, { status: 201 });
		},
		{ scope: 'data' }
	);
