import { csvOf } from '$lib/server/lineage/csv-export';
import { download } from '$lib/server/lineage/download';
import { parseUpload } from '$lib/server/lineage/parse';
import { previewView } from '$lib/server/lineage/preview-view';
import { confirmVintage } from '$lib/server/lineage/confirm';
import { storeUpload } from '$lib/server/lineage/upload';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { bytesOf, confirmation, openDesk, type Desk } from './desk';

describe('csvOf', () => {
	it('writes RFC 4180 with a byte order mark and CRLF', () =>
		expect(
			csvOf(
				['a', 'b'],
				[
					['x, "y"', 1.5],
					['two\nlines', null]
				]
			)
		).toBe('\ufeffa,b\r\n"x, ""y""",1.5\r\n"two\nlines",\r\n'));
	it('keeps numbers as numbers, to the last digit', () =>
		expect(csvOf(['n'], [[-0.35], [0.1 + 0.2], [1e-7]])).toBe(
			'\ufeffn\r\n-0.35\r\n0.30000000000000004\r\n1e-7\r\n'
		));
	it.each(['=1+1', '+1', '-2+3', '@SUM(A1)', '\tx', '＝1+1', '＋1', '－1', '＠x', ' =1', '"=1'])(
		'puts an apostrophe before the text %j',
		(text) => expect(csvOf(['t'], [[text]])).toContain(`'${text.replaceAll('"', '""')}`)
	);
	it('is read back to the same figures', async () => {
		const values = [1.5, -0.35, 0.1 + 0.2, 1e-7, 123456789.123];
		const text = csvOf(
			['period', '=x'],
			values.map((value, i) => [`200${i}`, value])
		);
		const outcome = await parseUpload({ bytes: bytesOf(text), choices: {} });
		expect(outcome).toMatchObject({ state: 'parsed', table: { columns: [{ name: "'=x", values }] } });
	});
});

describe('download', () => {
	const file = (fileName: string) => ({
		bytes: Buffer.from('date,a\n'),
		fileName,
		media: 'csv' as const,
		sha256: `sha256:${'ab'.repeat(32)}`
	});
	it('is an attachment under a policy of its own, with an ASCII name that we made', async () => {
		const response = download('D-0051/2', file('Zähler „März".csv'));
		expect(response.headers.get('content-disposition')).toBe(
			`attachment; filename="D-0051-2.csv"; filename*=UTF-8''Z%C3%A4hler%20%E2%80%9EM%C3%A4rz%22.csv`
		);
		expect(response.headers.get('content-security-policy')).toBe("sandbox; default-src 'none'");
		expect(response.headers.get('repr-digest')).toBe(
			`sha-256=:${Buffer.from('ab'.repeat(32), 'hex').toString('base64')}:`
		);
		expect(await response.text()).toBe('date,a\n');
	});
	it('lets no header in through the name', () => {
		const value = download('D-0051/2', file("a'b(c)*.csv")).headers.get('content-disposition');
		expect(value).toBe(`attachment; filename="D-0051-2.csv"; filename*=UTF-8''a%27b%28c%29%2A.csv`);
	});
});

describe('the preview of a file', () => {
	let desk: Desk;
	beforeAll(async () => {
		desk = await openDesk();
	});
	afterAll(() => desk.close());

	const text = (rows: number): string =>
		['date,loss,unemp', ...Array.from({ length: rows }, (_, i) => `${2000 + i},${i ** 2},${i}.5`)].join('\n');
	const send = (body: string) =>
		storeUpload(desk.ctx, desk.owner, { model: desk.model, bytes: bytesOf(body), fileName: 'q.csv' });
	const look = (upload: string, dataset?: string) =>
		previewView(desk.ctx, desk.owner, {
			model: desk.model,
			upload,
			choices: {},
			...(dataset && { dataset })
		});

	it('shows both ends of a table, and all of a short one', async () => {
		const long = (await look((await send(text(20))).upload)).table?.glimpse;
		expect(long?.first.map(({ period }) => period)).toEqual(['2000', '2001', '2002', '2003']);
		expect(long?.last.map(({ period }) => period)).toEqual(['2016', '2017', '2018', '2019']);
		const short = (await look((await send(text(9))).upload)).table?.glimpse;
		expect([short?.first.length, short?.last.length]).toEqual([9, 0]);
	});

	it('fills in the lineage of the vintage before, of the dataset it seems to continue', async () => {
		await confirmVintage(desk.ctx, desk.owner, desk.model, confirmation(await send(text(15))));
		const next = await send(`${text(16)}\n`);
		const offered = await look(next.upload);
		expect(offered.dataset).toBe('D-0001');
		expect(offered.table?.columns[0]).toMatchObject({
			column: 'loss',
			unit: 'per cent',
			source: 'Statistical office',
			code: 'X.loss',
			seasonal: 'adjusted',
			role: 'observed'
		});
		expect((await look(next.upload, 'new')).table?.columns[0]).toMatchObject({ unit: '', source: '' });
		const other = await send('date,x,y\n2000,1,2\n2001,2,3\n2002,3,5\n2003,4,4\n');
		expect((await look(other.upload)).dataset).toBe('');
	});
});
