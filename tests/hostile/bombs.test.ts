import { limits } from '$lib/domain/lineage';
import { sentences, uploadIssue, type UploadCode } from '$lib/domain/lineage-codes';
import { shownFileName } from '$lib/server/lineage/file-name';
import { parseUpload } from '$lib/server/lineage/parse';
import { storeUpload } from '$lib/server/lineage/upload';
import { Invalid } from '$lib/domain/faults';
import { readdirSync, readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';
import { count, openDesk } from '../server/lineage/desk';
import { rawZip } from './raw-zip';
import { bookParts, cleanSheet, sheet } from './workbook';

/** Made here and never stored: files whose size is the attack. */
const measured = async (
	bytes: Uint8Array
): Promise<{ code: UploadCode | 'accepted'; ms: number; mebibytes: number }> => {
	const held = process.memoryUsage().rss;
	const start = performance.now();
	const outcome = await parseUpload({ bytes, choices: {} });
	const ms = performance.now() - start;
	const mebibytes = (process.memoryUsage().rss - held) / 2 ** 20;
	return { code: outcome.state === 'parsed' ? 'accepted' : outcome.issues[0]!.code, ms, mebibytes };
};

const text = (content: string): Uint8Array => Buffer.from(content);
const zeros = (mebibytes: number): Buffer => Buffer.alloc(mebibytes * 2 ** 20);

describe('bombs', () => {
	it.each<[name: string, make: () => Uint8Array, code: UploadCode]>([
		[
			'a ratio of a thousand',
			() => rawZip([...bookParts(), { name: 'xl/media/zeros.bin', data: zeros(60) }]),
			'unpacks-too-large'
		],
		[
			'a part beyond 64 MiB',
			() => rawZip([...bookParts(), { name: 'xl/media/zeros.bin', data: zeros(65) }]),
			'unpacks-too-large'
		],
		[
			'parts beyond 128 MiB together',
			() =>
				rawZip([
					...bookParts(),
					...[1, 2, 3, 4, 5].map((n) => ({ name: `xl/media/${n}.bin`, data: zeros(1), size: 30 * 2 ** 20 }))
				]),
			'unpacks-too-large'
		],
		[
			'zeros that are declared small',
			() => rawZip([...bookParts(), { name: 'xl/media/zeros.bin', data: zeros(200), size: 1000 }]),
			'corrupt-zip'
		],
		[
			'a zip of zips',
			() => rawZip([{ name: 'inner.zip', data: rawZip([{ name: 'inner.zip', data: rawZip(bookParts()) }]) }]),
			'not-a-table'
		],
		[
			'a million tiny parts',
			() =>
				rawZip(
					Array.from({ length: 60_000 }, (_, i) => ({
						name: i === 0 ? '[Content_Types].xml' : i === 1 ? 'xl/workbook.xml' : `p${i}`,
						data: '',
						method: 0
					}))
				),
			'unpacks-too-large'
		],
		[
			'depth of 100,000',
			() => rawZip(bookParts({ sheets: [{ name: 'Data', xml: sheet('<a>'.repeat(100_000)) }] })),
			'xml'
		],
		[
			'a million attributes',
			() =>
				rawZip(
					bookParts({
						sheets: [
							{
								name: 'Data',
								xml: cleanSheet.replace(
									'<sheetData',
									`<x ${Array.from({ length: 300_000 }, (_, i) => `a${i}="${Math.abs(Math.sin(i))}"`).join(' ')}/><sheetData`
								)
							}
						]
					})
				),
			'xml'
		],
		[
			'a text of many MiB',
			() =>
				rawZip(
					bookParts({
						sheets: [
							{
								name: 'Data',
								xml: cleanSheet.replace(
									'loss',
									Array.from({ length: 300_000 }, (_, i) => Math.sin(i)).join(' ')
								)
							}
						]
					})
				),
			'xml'
		],
		['a million rows', () => text(`date,a\n${'2020Q1,1\n'.repeat(1_000_000)}`), 'too-many-rows'],
		[
			'ten thousand columns',
			() => text(`date${',a'.repeat(10_000)}\n2020Q1${',1'.repeat(10_000)}\n`),
			'too-many-columns'
		],
		['one line of 20 MiB', () => text(`date,a\n${'1'.repeat(20 * 2 ** 20)}`), 'too-long-cell'],
		['one cell of 1 MiB', () => text(`date,a\n2020Q1,"${'x'.repeat(900_000)}"\n2020Q2,1\n`), 'too-long-cell'],
		['25 MiB and one byte', () => Buffer.alloc(limits.bytes + 1, 0x31), 'too-large'],
		[
			'blanks for a slow pattern',
			() =>
				text(
					`date,a\n${Array.from({ length: 300 }, (_, i) => `${1700 + i},1${' '.repeat(30_000)}xxxx`).join('\n')}\n`
				),
			'no-numbers'
		],
		['quotes for a slow pattern', () => text(`date,a\n${'"'.repeat(2 ** 20 - 1)}\n`), 'quote'],
		['semicolons, commas and tabs', () => text(`${',;\t|'.repeat(50_000)}\n`.repeat(4)), 'delimiter']
	])('%s', async (_, make, code) => {
		const { code: found, ms, mebibytes } = await measured(make());
		expect(found).toBe(code);
		expect(ms).toBeLessThan(4000);
		expect(mebibytes).toBeLessThan(300);
	});

	it('leaves nothing behind in the register', async () => {
		const desk = await openDesk();
		const bytes = rawZip([...bookParts(), { name: 'xl/media/zeros.bin', data: zeros(60) }]);
		await expect(
			storeUpload(desk.ctx, desk.owner, { model: desk.model, bytes, fileName: 'bomb.xlsx' })
		).rejects.toThrow(Invalid);
		await expect(
			storeUpload(desk.ctx, desk.owner, {
				model: desk.model,
				bytes: Buffer.alloc(limits.bytes + 1),
				fileName: 'large.csv'
			})
		).rejects.toThrow('Over 25 MiB.');
		expect(count(desk.ctx, 'upload')).toBe(0);
		desk.close();
	});
});

describe('file names', () => {
	it.each([
		['../../etc/passwd', 'passwd'],
		['C:\\data\\q.csv', 'q.csv'],
		['a\r\nb.csv', 'ab.csv'],
		['x'.repeat(300) + '.csv', 'x'.repeat(120)],
		['CON', 'CON'],
		['aux.csv. ', 'aux.csv.'],
		['.csv', '.csv'],
		['-rf.csv', '-rf.csv'],
		['a\u200bb.csv', 'ab.csv'],
		['e\u0301.csv', '\u00e9.csv'],
		['\u{1f4c8}.csv', '\u{1f4c8}.csv'],
		["'; DROP TABLE entry.csv", "'; DROP TABLE entry.csv"],
		['<img onerror=x>.csv', '<img onerror=x>.csv'],
		['%2e%2e%2f.csv', '%2e%2e%2f.csv'],
		['', 'upload'],
		['folder/', 'upload']
	])('%j is shown as %j', (given, name) => expect(shownFileName(given)).toEqual({ name }));

	it.each(['a\0b.csv', 'invoice\u202excsv.exe', 'a\u2067b.csv'])('%j is refused', (given) =>
		expect(shownFileName(given)).toMatchObject({ issue: { code: 'file-name' } })
	);
});

describe('the closed list of codes', () => {
	/** Codes that need a register or a request, and where they are tested. */
	const elsewhere: readonly UploadCode[] = [
		'same-file',
		'vintage-twice',
		'changed',
		'column-unknown',
		'file-name',
		'took-too-long',
		'too-much-memory',
		'request'
	];
	/** Codes of the files that are made here. */
	const here: readonly UploadCode[] = [
		'too-large',
		'too-many-rows',
		'too-many-columns',
		'too-many-cells',
		'too-long-cell',
		'too-many-sheets',
		'delimiter',
		'no-numbers'
	];

	it('is covered by the files on disk, but for those', () => {
		const folder = fileURLToPath(new URL('./files/', import.meta.url));
		const covered = new Set(
			readdirSync(folder)
				.filter((name) => name.endsWith('.json'))
				.map((name) => (JSON.parse(readFileSync(`${folder}${name}`, 'utf8')) as { code?: UploadCode }).code)
		);
		const missing = (Object.keys(sentences) as UploadCode[]).filter((code) => !covered.has(code));
		expect(missing.sort()).toEqual([...elsewhere, ...here].sort());
	});

	it.each<[UploadCode, () => Uint8Array]>([
		[
			'too-many-cells',
			() => text(`date${',a'.repeat(200)}\n${`2020Q1${',1'.repeat(200)}\n`.repeat(10_500)}`)
		],
		[
			'too-many-sheets',
			() =>
				rawZip(
					bookParts({ sheets: Array.from({ length: 65 }, (_, i) => ({ name: `S${i}`, xml: cleanSheet })) })
				)
		],
		['delimiter', () => text('a;b,c;d\n1;2,3;4\n5;6,7;8\n')],
		['no-numbers', () => text('date,a\n2020Q1,x\n2020Q2,y\n2020Q3,z\n2020Q4,x\n')]
	])('%s', async (code, make) => expect((await measured(make())).code).toBe(code));

	it('says how to mend it, in a sentence', () => {
		expect(uploadIssue('ragged', [7, 1, 3])).toEqual({
			pointer: '',
			code: 'ragged',
			message: 'Row 7 has 1 field, the header 3.'
		});
		expect(uploadIssue('encoding', [3, 'Windows-1252 or Latin-1'], { row: 3 }).message).toBe(
			'Row 3 is not UTF-8; it looks like Windows-1252 or Latin-1. Save as CSV UTF-8.'
		);
	});
});
