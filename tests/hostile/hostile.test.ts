import { Invalid } from '$lib/domain/faults';
import { questionCodes, type UploadCode } from '$lib/domain/lineage-codes';
import { confirmVintage } from '$lib/server/lineage/confirm';
import { discardUpload, storeUpload } from '$lib/server/lineage/upload';
import { vintageFile, vintageView } from '$lib/server/lineage/vintage-view';
import { readdirSync, readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { confirmation, count, lastFolio, openDesk, typesAfter, type Desk } from '../server/lineage/desk';
import type { Expected } from './case';
import { textFiles } from './text-files';
import { workbookFiles } from './workbook-files';

const folder = fileURLToPath(new URL('./files/', import.meta.url));
const files = readdirSync(folder).filter((name) => !name.endsWith('.json'));
const expectedOf = (name: string): Expected =>
	JSON.parse(readFileSync(`${folder}${name}.json`, 'utf8')) as Expected;

/** Longest time one of the stored files may take: all of them are small. */
const longest = 2000;

describe('the files on disk', () => {
	it('are those that the script makes', () => {
		const made = [...textFiles, ...workbookFiles];
		expect(made.map(({ name }) => name).sort()).toEqual([...files].sort());
		for (const { name, bytes, expected } of made) {
			expect(readFileSync(`${folder}${name}`).equals(bytes), name).toBe(true);
			expect(expectedOf(name), name).toEqual(expected);
		}
	});
	it('cover accepted and refused ones', () => {
		const verdicts = files.map((name) => expectedOf(name).verdict);
		expect(verdicts.filter((verdict) => verdict === 'A').length).toBeGreaterThan(40);
		expect(verdicts.filter((verdict) => verdict === 'R').length).toBeGreaterThan(100);
	});
});

describe('a hostile or odd file', () => {
	let desk: Desk;
	beforeAll(async () => {
		desk = await openDesk();
	});
	afterAll(() => desk.close());

	const state = () => ({
		blobs: count(desk.ctx, 'blob'),
		uploads: count(desk.ctx, 'upload'),
		vintages: count(desk.ctx, 'vintage')
	});

	/** Sends a file and, when it can be read, confirms it: the whole way that a person goes. */
	const take = async (name: string, { choices }: Expected): Promise<string> => {
		const { ctx, owner, model } = desk;
		const bytes = readFileSync(`${folder}${name}`);
		const preview = await storeUpload(ctx, owner, {
			model,
			bytes,
			fileName: name,
			...(choices && { choices })
		});
		try {
			if (!preview.parsed) throw new Invalid(preview.issues);
			return await confirmVintage(ctx, owner, model, confirmation(preview, { name }));
		} catch (error) {
			discardUpload(ctx, owner, { model, upload: preview.upload });
			throw error;
		}
	};

	it.each(files.map((name) => [name, expectedOf(name)] as const))('%s', async (name, expected) => {
		const [before, folio, start] = [state(), lastFolio(desk.ctx), performance.now()];
		const outcome = await take(name, expected).then(
			(ref) => ref,
			(error: unknown) => error
		);
		expect(performance.now() - start).toBeLessThan(longest);
		if (expected.verdict === 'R') {
			if (!(outcome instanceof Invalid))
				throw outcome instanceof Error ? outcome : new Error(`${name} was taken`);
			const [issue] = outcome.issues;
			expect(issue?.code, issue?.message).toBe(expected.code);
			if (expected.row !== undefined) expect(issue?.row).toBe(expected.row);
			if (expected.column !== undefined) expect(issue?.column).toBe(expected.column);
			expect(issue?.message).toMatch(/\S.*[.?]$/);
			expect(state()).toEqual(before);
			// A question is no refusal: the file may be read with an answer. Figures ahead of their date are an input to mend.
			const waits = questionCodes.has(expected.code as UploadCode) || expected.code === 'future';
			expect(typesAfter(desk.ctx, folio)).toEqual(waits ? [] : ['upload.refused']);
			return;
		}
		if (typeof outcome !== 'string') throw outcome;
		const view = vintageView(desk.ctx, desk.owner, outcome);
		const notes = [...view.vintage.notes, ...view.findings].map(({ code }) => code);
		expect(notes).toEqual(expect.arrayContaining([...(expected.notes ?? [])]));
		if (expected.figures)
			expect(view.table.columns[0]?.values.slice(0, expected.figures.length)).toEqual(expected.figures);
		for (const value of view.table.columns.flatMap(({ values }) => values))
			expect(value === null || (Number.isFinite(value) && !Object.is(value, -0))).toBe(true);
		expect(vintageFile(desk.ctx, desk.owner, outcome).bytes.equals(readFileSync(`${folder}${name}`))).toBe(
			true
		);
		expect(typesAfter(desk.ctx, folio)).toEqual(['dataset.opened', 'vintage.stored']);
		expect(state()).toMatchObject({ uploads: before.uploads, vintages: before.vintages + 1 });
	});
});
