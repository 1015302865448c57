import { parseUpload } from '$lib/server/lineage/parse';
import { describe, expect, it } from 'vitest';
import { rawZip } from './raw-zip';
import { bookParts, cleanRows, cleanSheet, dated, sheet, sheetData, withCell, type Book } from './workbook';

const read = (book: Book) => parseUpload({ bytes: rawZip(bookParts(book)), choices: {} });
const ofSheet = (xml: string, more: Book = {}) => read({ ...more, sheets: [{ name: 'Data', xml }] });
const table = async (book: Promise<Awaited<ReturnType<typeof read>>>) => {
	const outcome = await book;
	if (outcome.state !== 'parsed') throw new Error(outcome.issues[0]?.message);
	return outcome.table;
};
const code = async (book: ReturnType<typeof read>) => {
	const outcome = await book;
	return outcome.state === 'parsed' ? 'parsed' : outcome.issues[0]?.code;
};

describe('what a workbook says of itself', () => {
	it('trap-17: sizes and counts are the file’s words; what is read is counted', async () => {
		const lying = cleanSheet.replace('<sheetData>', '<dimension ref="A1:XFD1048576"/><sheetData>');
		expect((await table(ofSheet(lying))).periods).toHaveLength(6);
		const strings = (count: number) => ({
			sharedStrings: ['date', 'loss'],
			parts: {
				'xl/sharedStrings.xml': `<sst xmlns="http://schemas.openxmlformats.org/spreadsheetml/2006/main" count="${count}" uniqueCount="${count}"><si><t>date</t></si><si><t>loss</t></si></sst>`
			}
		});
		const third = sheet(sheetData(withCell(1, 2, { xml: '<c r="REF" t="s"><v>2</v></c>' })));
		const second = sheet(sheetData(withCell(1, 2, { xml: '<c r="REF" t="s"><v>1</v></c>' })));
		expect(await code(ofSheet(third, strings(1000)))).toBe('corrupt');
		expect((await table(ofSheet(second, strings(0)))).columns[0]?.name).toBe('loss');
	});

	it('trap-18: day 60 of the 1900 system, 1904 workbooks, percentages', async () => {
		expect(await code(ofSheet(sheet(sheetData(withCell(2, 1, dated(60))))))).toBe('date');
		// Serial 43831 is 1 January 2020 in the 1900 system and 1,462 days later in the other: 2 January 2024.
		const in1900 = await table(ofSheet(cleanSheet));
		const in1904 = await table(ofSheet(cleanSheet, { dates1904: true }));
		expect([in1900.periods[0], in1904.periods[0]]).toEqual(['2020-Q1', '2024-Q1']);
		// 59 and 61 are 28 February and 1 March 1900.
		const early = [59, 61, 92, 122].map((serial, i) => [dated(serial), i ** 2, 1]);
		expect((await table(ofSheet(sheet(sheetData([cleanRows[0]!, ...early]))))).periods).toEqual([
			'1900-02',
			'1900-03',
			'1900-04',
			'1900-05'
		]);
		const percent = sheet(sheetData(withCell(2, 2, { xml: '<c r="REF" s="2"><v>0.035</v></c>' })));
		expect((await table(ofSheet(percent))).columns[0]?.values[0]).toBe(0.035);
	});

	it('trap-21: unpacking stops at the declared size, in memory too', async () => {
		const zeros = rawZip([
			...bookParts(),
			{ name: 'xl/media/zeros.bin', data: Buffer.alloc(400 * 2 ** 20), size: 1000 }
		]);
		const held = process.memoryUsage().rss;
		const outcome = await parseUpload({ bytes: zeros, choices: {} });
		expect(outcome).toMatchObject({ state: 'refused', issues: [{ code: 'corrupt-zip' }] });
		expect((process.memoryUsage().rss - held) / 2 ** 20).toBeLessThan(64);
	});
});
