import { Absent, Conflict, Invalid, Refused } from '$lib/domain/faults';
import { attachDataset } from '$lib/server/lineage/attach';
import { confirmVintage } from '$lib/server/lineage/confirm';
import { modelMayUse, readTable, readVintage, vintagesOfModel } from '$lib/server/lineage/read';
import { seriesDictionary } from '$lib/server/lineage/series';
import { discardUpload, previewUpload, storeUpload } from '$lib/server/lineage/upload';
import { dataOfModel, vintageFile, vintageView } from '$lib/server/lineage/vintage-view';

import { entryTexts, replay } from '$lib/server/log/replay';
import { registerModel } from '$lib/server/register/model';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { modelInput } from '../register/bank';
import { bytesOf, confirmation, count, lastFolio, openDesk, typesAfter, type Desk } from './desk';

const text =
	'date,loss,unemp\r\n2024Q1,1.5,5\r\n2024Q2,1.75,5.25\r\n2024Q3,2,5.1\r\n2024Q4,1.9,5.4\r\n2025Q1,2.2,5.6\r\n';
const later = text.replace('2024Q4,1.9,5.4', '2024Q4,1.8,5.4') + '2025Q2,2.4,5.9\r\n';

const fault = async (work: Promise<unknown>): Promise<Invalid> => {
	const error: unknown = await work.then(
		() => undefined,
		(thrown: unknown) => thrown
	);
	if (error instanceof Invalid) return error;
	throw error instanceof Error ? error : new Error('nothing was refused');
};
const codes = async (work: Promise<unknown>): Promise<(string | undefined)[]> =>
	(await fault(work)).issues.map(({ code }) => code);

describe('a vintage', () => {
	let desk: Desk;
	beforeEach(async () => {
		desk = await openDesk();
	});
	afterEach(() => desk.close());

	const send = (body: string, fileName = 'losses.csv') =>
		storeUpload(desk.ctx, desk.owner, { model: desk.model, bytes: bytesOf(body), fileName });
	const store = async (body: string, changed: Parameters<typeof confirmation>[1] = {}) =>
		confirmVintage(desk.ctx, desk.owner, desk.model, confirmation(await send(body), changed));

	it('is stored with bytes, table, lineage and entries in one go, and read back to the byte', async () => {
		const before = lastFolio(desk.ctx);
		const ref = await store(text);
		expect(ref).toBe('D-0001/1');
		expect(typesAfter(desk.ctx, before)).toEqual(['dataset.opened', 'vintage.stored']);
		expect(count(desk.ctx, 'upload')).toBe(0);
		const file = vintageFile(desk.ctx, desk.owner, ref);
		expect(file.bytes.toString('utf8')).toBe(text);
		const vintage = readVintage(desk.ctx, desk.ctx.read, ref);
		expect(vintage).toMatchObject({
			from: '2024-Q1',
			to: '2025-Q1',
			observations: 5,
			frequency: 'quarterly',
			fileName: 'losses.csv'
		});
		expect(vintage.columns[1]).toEqual({
			name: 'unemp',
			role: 'observed',
			series: 'statistical office/x.unemp',
			unit: 'per cent',
			source: 'Statistical office',
			code: 'X.unemp',
			vintageDate: '2026-02-15',
			seasonal: 'adjusted'
		});
		expect(readTable(desk.ctx, vintage).columns[0]).toEqual({
			name: 'loss',
			values: [1.5, 1.75, 2, 1.9, 2.2]
		});
		expect(vintagesOfModel(desk.ctx.read, desk.model).map((each) => each.ref)).toEqual([ref]);
	});

	it('leaves nothing before the preview is confirmed', async () => {
		const [folio, blobs] = [lastFolio(desk.ctx), count(desk.ctx, 'blob')];
		const preview = await send(text);
		expect(preview.parsed?.table.columns.map(({ name }) => name)).toEqual(['loss', 'unemp']);
		expect([lastFolio(desk.ctx), count(desk.ctx, 'blob'), count(desk.ctx, 'upload')]).toEqual([
			folio,
			blobs,
			1
		]);
		discardUpload(desk.ctx, desk.owner, { model: desk.model, upload: preview.upload });
		expect(count(desk.ctx, 'upload')).toBe(0);
	});

	it('keeps an upload for a day, for the person who sent it alone', async () => {
		const preview = await send(text);
		const other = desk.person('Bo Marl', 'owner');
		await expect(confirmVintage(desk.ctx, other, desk.model, confirmation(preview))).rejects.toThrow(Refused);
		desk.clock.forward(25 * 3_600_000);
		await expect(confirmVintage(desk.ctx, desk.owner, desk.model, confirmation(preview))).rejects.toThrow(
			Conflict
		);
		await send(later);
		expect(count(desk.ctx, 'upload')).toBe(1);
	});

	it('enters a refusal without the file name, and stores nothing', async () => {
		const [folio, blobs] = [lastFolio(desk.ctx), count(desk.ctx, 'blob')];
		const refused = await fault(
			send('date,a\n2024Q1,1\n2024Q1,2\n2024Q2,3\n2024Q3,4\n', 'letter of Mrs Pell.csv')
		);
		expect(refused.issues[0]).toMatchObject({
			code: 'period-twice',
			row: 3,
			message: 'letter of Mrs Pell.csv: 2024-Q1 stands in rows 2 and 3. Keep one.'
		});
		expect(typesAfter(desk.ctx, folio)).toEqual(['upload.refused']);
		const entry = desk.ctx.read.first<{ body: string }>(
			desk.ctx.read.q
				.selectFrom('entry')
				.select('body')
				.where('seq', '=', folio + 1)
		);
		expect(entry?.body).toContain('"code":"period-twice"');
		expect(entry?.body).not.toContain('Pell');
		expect([count(desk.ctx, 'blob'), count(desk.ctx, 'upload')]).toEqual([blobs, 0]);
	});

	it('refuses a file whose reading ends its thread, and says why', async () => {
		const outOfMemory = Object.assign(new Error('heap'), { code: 'ERR_WORKER_OUT_OF_MEMORY' });
		const ctx = { ...desk.ctx, pool: { ...desk.ctx.pool, parse: () => Promise.reject(outOfMemory) } };
		const before = lastFolio(desk.ctx);
		const sent = { model: desk.model, bytes: bytesOf(text), fileName: 'x.csv' };
		expect(await codes(storeUpload(ctx, desk.owner, sent))).toEqual(['too-much-memory']);
		expect(typesAfter(desk.ctx, before)).toEqual(['upload.refused']);
		const broken = {
			...ctx,
			pool: { ...ctx.pool, parse: () => Promise.reject(new Error('a fault of ours')) }
		};
		await expect(storeUpload(broken, desk.owner, sent)).rejects.toThrow('a fault of ours');
		expect(count(desk.ctx, 'upload')).toBe(0);
	});

	it('refuses a reading that takes too long', async () => {
		vi.spyOn(AbortSignal, 'timeout').mockReturnValueOnce(AbortSignal.abort());
		const ctx = {
			...desk.ctx,
			pool: { ...desk.ctx.pool, parse: () => Promise.reject(new Error('aborted')) }
		};
		const sent = { model: desk.model, bytes: bytesOf(text), fileName: 'x.csv' };
		expect(await codes(storeUpload(ctx, desk.owner, sent))).toEqual(['took-too-long']);
	});

	it('refuses the same bytes again', async () => {
		await store(text);
		expect(await codes(send(text))).toEqual(['same-file']);
	});

	it('refuses other figures under the same vintage date, and takes them under another', async () => {
		await store(text);
		const second = await send(later);
		const again = confirmation(second, { dataset: 'D-0001' });
		const refused = await fault(confirmVintage(desk.ctx, desk.owner, desk.model, again));
		expect(refused.issues[0]).toMatchObject({
			code: 'vintage-twice',
			pointer: '/columns/0/vintageDate',
			column: 'loss'
		});
		expect(
			await confirmVintage(desk.ctx, desk.owner, desk.model, { ...again, vintageDate: '2026-03-01' })
		).toBe('D-0001/2');
	});

	it('refuses a file that is not the one previewed', async () => {
		const [one, other] = [await send(text), await send(later)];
		const mixed = { ...confirmation(one), sha256: other.sha256 };
		expect(await codes(confirmVintage(desk.ctx, desk.owner, desk.model, mixed))).toEqual(['changed']);
	});

	it('asks unit, provider and vintage date of every column in use, and a word on each column', async () => {
		const preview = await send(text);
		const confirm = (changed: Parameters<typeof confirmation>[1]) =>
			fault(confirmVintage(desk.ctx, desk.owner, desk.model, confirmation(preview, changed)));
		const missing = await confirm({
			columns: [
				{ column: 'loss', role: 'observed' },
				{ column: 'unemp', role: 'left-out' }
			]
		});
		expect(missing.issues.map(({ pointer }) => pointer)).toEqual(['/columns/0/unit', '/columns/0/source']);
		expect((await confirm({ vintageDate: '' })).issues[0]?.pointer).toBe('/vintageDate');
		expect((await confirm({ vintageDate: '2026-03-03' })).issues[0]?.pointer).toBe('/vintageDate');
		const one = { column: 'loss', role: 'observed', unit: 'per cent', source: 'Bank' } as const;
		expect((await confirm({ columns: [one] })).issues[0]?.message).toContain('Say of unemp');
		const unknown = await confirm({ columns: [one, { ...one, column: 'unemp' }, { ...one, column: 'gdp' }] });
		expect(unknown.issues[0]).toMatchObject({ code: 'column-unknown', pointer: '/columns/2/column' });
	});

	it('stores only the columns in use', async () => {
		const preview = await send(text);
		const ref = await confirmVintage(
			desk.ctx,
			desk.owner,
			desk.model,
			confirmation(preview, {
				columns: [
					{ column: 'loss', role: 'observed', unit: 'per cent', source: 'Bank' },
					{ column: 'unemp', role: 'left-out' }
				]
			})
		);
		expect(vintageView(desk.ctx, desk.owner, ref).table.columns.map(({ name }) => name)).toEqual(['loss']);
		expect(vintageView(desk.ctx, desk.owner, ref).vintage.columns[1]).toEqual({
			name: 'unemp',
			role: 'left-out'
		});
	});

	it('refuses figures for periods after the vintage date, unless they are a scenario', async () => {
		const preview = await send(text);
		const columns = confirmation(preview).columns.map((column) => ({ ...column, vintageDate: '2024-12-31' }));
		const refused = await fault(
			confirmVintage(desk.ctx, desk.owner, desk.model, confirmation(preview, { columns }))
		);
		expect(refused.issues.map(({ code }) => code)).toEqual(['future', 'future']);
		const scenario = columns.map((column, i) =>
			i === 1 ? { ...column, role: 'scenario' as const } : { ...column, vintageDate: '2026-01-31' }
		);
		expect(
			await confirmVintage(desk.ctx, desk.owner, desk.model, confirmation(preview, { columns: scenario }))
		).toBe('D-0001/1');
	});

	it('compares a vintage with the one before and names changes of lineage', async () => {
		await store(text);
		const second = await send(later);
		const input = confirmation(second, { dataset: 'D-0001', vintageDate: '2026-03-01' });
		await confirmVintage(desk.ctx, desk.owner, desk.model, {
			...input,
			columns: input.columns.map((column, i) =>
				i === 1 ? { ...column, unit: 'per cent of labour force' } : column
			)
		});
		const view = vintageView(desk.ctx, desk.owner, 'D-0001/2');
		expect(view.before?.comparison.columns).toMatchObject([
			{
				name: 'loss',
				change: 'revised',
				newPeriods: ['2025-Q2'],
				revised: [{ period: '2024-Q4', before: 1.9, after: 1.8 }]
			},
			{ name: 'unemp', change: 'unchanged', newPeriods: ['2025-Q2'] }
		]);
		expect(view.changes).toEqual([expect.objectContaining({ code: 'unit-changed', column: 'unemp' })]);
	});

	it('reads a waiting upload again with other choices', async () => {
		const preview = await send('date;a\n2024Q1;1,234\n2024Q2;2,345\n2024Q3;3,456\n2024Q4;4,567\n');
		expect(preview).toMatchObject({ questions: [{ choice: 'decimal' }] });
		expect(preview.parsed).toBeUndefined();
		const again = await previewUpload(desk.ctx, desk.owner, {
			model: desk.model,
			upload: preview.upload,
			choices: { decimal: ',' }
		});
		expect(again.parsed?.table.columns[0]?.values[0]).toBe(1.234);
		const ref = await confirmVintage(desk.ctx, desk.owner, desk.model, confirmation(again));
		expect(vintageView(desk.ctx, desk.owner, ref).table.columns[0]?.values[0]).toBe(1.234);
	});

	it('is shared with another model by attaching its dataset', async () => {
		await store(text);
		const second = registerModel(desk.ctx, desk.owner, modelInput({ name: 'Another' }));
		expect(modelMayUse(desk.ctx.read, second, 'D-0001')).toBe(false);
		attachDataset(desk.ctx, desk.owner, { model: second, dataset: 'D-0001' });
		expect(modelMayUse(desk.ctx.read, second, 'D-0001')).toBe(true);
		expect(() => attachDataset(desk.ctx, desk.owner, { model: second, dataset: 'D-0001' })).toThrow(Conflict);
		expect(dataOfModel(desk.ctx, desk.owner, second)[0]).toMatchObject({
			ref: 'D-0001',
			models: [desk.model, second]
		});
	});

	it('is not shown to the owner of another model, nor taken from them', async () => {
		await store(text);
		const stranger = desk.person('Bo Marl', 'owner');
		const theirs = registerModel(desk.ctx, stranger, modelInput({ name: 'Theirs' }));
		for (const look of [
			() => vintageView(desk.ctx, stranger, 'D-0001/1'),
			() => vintageFile(desk.ctx, stranger, 'D-0001/1'),
			() => dataOfModel(desk.ctx, stranger, desk.model),
			() => attachDataset(desk.ctx, stranger, { model: theirs, dataset: 'D-0001' })
		])
			expect(look).toThrow(Refused);
		expect(seriesDictionary(desk.ctx, stranger)).toEqual([]);
		await expect(
			storeUpload(desk.ctx, stranger, { model: desk.model, bytes: bytesOf(later), fileName: 'x.csv' })
		).rejects.toThrow(Refused);
		const validator = desk.person('Cleo Strand', 'validator');
		expect(vintageView(desk.ctx, validator, 'D-0001/1').vintage.ref).toBe('D-0001/1');
	});

	it('lists each series once, with the vintages and models that use it', async () => {
		await store(text);
		await store(later, { dataset: 'D-0001', vintageDate: '2026-03-01' });
		expect(seriesDictionary(desk.ctx, desk.owner)[1]).toEqual({
			id: 'statistical office/x.unemp',
			source: 'Statistical office',
			code: 'X.unemp',
			label: 'unemp',
			unit: 'per cent',
			seasonal: 'adjusted',
			vintages: ['D-0001/1', 'D-0001/2'],
			latest: '2026-03-01',
			models: [desk.model]
		});
	});

	it('stands the same after a replay of the log', async () => {
		await store(text);
		await store(later, { dataset: 'D-0001', vintageDate: '2026-03-01' });
		const seq = lastFolio(desk.ctx);
		const past = await replay(entryTexts(desk.ctx.read, seq), desk.ctx.projectors);
		expect(readVintage(desk.ctx, past.handle, 'D-0001/1')).toEqual(
			readVintage(desk.ctx, desk.ctx.read, 'D-0001/1')
		);
		expect(() => readVintage(desk.ctx, past.handle, 'D-0001/2')).toThrow(Absent);
		past.close();
	});
});
