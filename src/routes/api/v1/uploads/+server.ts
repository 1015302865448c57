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

/** Reads the body up to the limit; a declared length is not believed, and what is beyond is not read. */
const readBody = async (request: Request): Promise<Uint8Array | undefined> => {
	const chunks: Uint8Array[] = [];
	let size = 0;
	for await (const chunk of (request.body ?? []) as AsyncIterable<Uint8Array>) {
		size += chunk.length;
		if (size > limits.bytes) return undefined;
		chunks.push(chunk);
	}
	return Buffer.concat(chunks);
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
			if (!bytes) {
				const issue = tooLarge();
				return problem({ status: 413, title: 'Too large', detail: issue.message, issues: [issue] });
			}
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
