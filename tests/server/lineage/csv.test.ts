import { parseUpload, type ParseOutcome } from '$lib/server/lineage/parse';
import type { Choices } from '$lib/domain/lineage';
import { describe, expect, it } from 'vitest';

const read = (text: string | Uint8Array, choices: Choices = {}): Promise<ParseOutcome> =>
	parseUpload({ bytes: typeof text === 'string' ? new TextEncoder().encode(text) : text, choices });

const table = async (text: string | Uint8Array, choices: Choices = {}) => {
	const outcome = await read(text, choices);
	if (outcome.state !== 'parsed') throw new Error(outcome.issues.map(({ message }) => message).join('\n'));
	return outcome.table;
};
const codes = async (text: string | Uint8Array, choices: Choices = {}) => {
	const outcome = await read(text, choices);
	return outcome.state === 'parsed' ? [] : outcome.issues.map(({ code }) => code);
};
const rows = 'date,a\n2020Q1,1.5\n2020Q2,2\n2020Q3,3\n2020Q4,4\n';

describe('CSV', () => {
	it('reads a plain table', async () => {
		expect(await table(rows)).toEqual({
			frequency: 'quarterly',
			periods: ['2020-Q1', '2020-Q2', '2020-Q3', '2020-Q4'],
			columns: [{ name: 'a', values: [1.5, 2, 3, 4] }],
			notes: []
		});
	});
	it('reads every line end alike', async () => {
		const expected = await table(rows);
		expect(await table(rows.replaceAll('\n', '\r\n'))).toEqual(expected);
		expect(await table(rows.replaceAll('\n', '\r'))).toEqual(expected);
		expect(await table(rows.trimEnd())).toEqual(expected);
		expect(await table(rows.replace('\n', '\r\n'))).toEqual(expected);
	});
	it('reads UTF-8 and UTF-16 by byte order mark', async () => {
		const expected = (await table(rows)).columns;
		const utf16 = Buffer.from(`\ufeff${rows}`, 'utf16le');
		expect((await table(new TextEncoder().encode(`\ufeff${rows}`))).columns).toEqual(expected);
		expect((await table(utf16)).columns).toEqual(expected);
		expect((await table(Buffer.from(utf16).swap16())).columns).toEqual(expected);
	});
	it('reads semicolons with decimal comma', async () => {
		const read = await table(
			'Datum;Kurs;Menge\n2020Q1;1,5;1.234,25\n2020Q2;2,25;2\n2020Q3;3;3\n2020Q4;4;4\n'
		);
		expect(read.columns[0]?.values).toEqual([1.5, 2.25, 3, 4]);
		expect(read.columns[1]?.values[0]).toBe(1234.25);
		expect(read.notes.map(({ code }) => code)).toContain('decimal-comma');
	});
	it('asks about 1,234 and takes the answer', async () => {
		const text = 'date;a\n2020Q1;1,234\n2020Q2;2,345\n2020Q3;3,456\n2020Q4;4,567\n';
		const outcome = await read(text);
		expect(outcome).toMatchObject({
			state: 'question',
			issues: [{ code: 'ambiguous-number', column: 'a', row: 2 }]
		});
		expect((await table(text, { decimal: '.' })).columns[0]?.values[0]).toBe(1234);
		expect((await table(text, { decimal: ',' })).columns[0]?.values[0]).toBe(1.234);
	});
	it('reads 1,234 as a thousand where another cell decides', async () => {
		const read = await table('date\ta\n2020Q1\t1,234\n2020Q2\t12.5\n2020Q3\t3\n2020Q4\t4\n');
		expect(read.columns[0]?.values).toEqual([1234, 12.5, 3, 4]);
	});
	it('refuses both marks in one column, with rows', async () => {
		const outcome = await read('date;a\n2020Q1;1.234,5\n2020Q2;1,234.5\n2020Q3;3\n2020Q4;4\n');
		expect(outcome).toMatchObject({
			state: 'refused',
			issues: [{ code: 'mixed-decimal', message: expect.stringContaining('(row 2)') as string }]
		});
	});
	it('reads quoted delimiters, line breaks and doubled quotes', async () => {
		const read = await table('date,"a, ""real""\nterms"\n2020Q1,"1"\n2020Q2,2\n2020Q3,3\n2020Q4,4\n').catch(
			(e: Error) => e.message
		);
		// A line break in a name is a control character there.
		expect(read).toContain('cannot be shown safely');
		const named = await table('date,"a, ""real"""\n2020Q1,"1"\n2020Q2,2\n2020Q3,3\n2020Q4,4\n');
		expect(named.columns[0]?.name).toBe('a, "real"');
	});
	it('names rows as the file counts them, past quoted line breaks and blank lines', async () => {
		const outcome = await read('date,a,note\n2020Q1,1,"two\nlines"\n\n2020Q2,x,y\n2020Q3,3,z\n2020Q4,4,z\n');
		expect(outcome).toMatchObject({ issues: [{ code: 'number', row: 5, column: 'a' }] });
	});
	it('lists up to twenty bad cells', async () => {
		const bad = Array.from({ length: 30 }, (_, i) => `${1990 + i},${i === 0 ? 1 : 'x'}`).join('\n');
		expect(await codes(`year,a\n${bad}\n`)).toHaveLength(20);
	});
	it('leaves a column of words out, with a note', async () => {
		const read = await table('date,a,flag\n2020Q1,1,ok\n2020Q2,2,ok\n2020Q3,3,revised\n2020Q4,4,ok\n');
		expect(read.columns.map(({ name }) => name)).toEqual(['a']);
		expect(read.notes).toContainEqual(expect.objectContaining({ code: 'text-column', column: 'flag' }));
	});
	it('takes the header row and the range that are chosen', async () => {
		const text = 'Title\nunits,bn\ndate,a\n2020Q1,1\n2020Q2,2\n2020Q3,3\n2020Q4,4\n2021Q1,99\n';
		expect(await codes(text)).toEqual(['layout']);
		expect((await table(text, { headerRow: 3 })).columns[0]?.values).toEqual([1, 2, 3, 4, 99]);
		expect((await table(text, { headerRow: 3, range: 'A4:B7' })).columns[0]?.values).toEqual([1, 2, 3, 4]);
	});
	it('asks about a second row of words', async () => {
		const text = 'date,a,b\nperiod,EUR bn,per cent\n2020Q1,1,2\n2020Q2,2,3\n2020Q3,3,4\n2020Q4,4,5\n';
		expect(await codes(text)).toEqual(['layout']);
		expect((await table(text, { headerRow: 1, range: 'A3:C6' })).columns.map(({ name }) => name)).toEqual([
			'a',
			'b'
		]);
	});
	it('reads periods from the column chosen, and from a year beside a quarter', async () => {
		const text = 'id,date,a\n1,2020Q1,1\n2,2020Q2,2\n3,2020Q3,3\n4,2020Q4,4\n';
		expect((await table(text)).columns.map(({ name }) => name)).toEqual(['id', 'a']);
		expect(await codes(text, { periodColumn: 'nothing' })).toEqual(['column-unknown']);
		expect((await table('year,quarter,a\n2020,1,1\n2020,2,2\n2020,3,3\n2020,4,4\n')).periods[3]).toBe(
			'2020-Q4'
		);
	});
	it('is fast enough on the largest file', async () => {
		const columns = Array.from({ length: 100 }, (_, i) => `c${i}`);
		const line = columns.map((_, i) => (1000 + i * 1.37).toFixed(3)).join(',');
		const body = Array.from(
			{ length: 12_000 },
			(_, i) => `${1000 + Math.floor(i / 12)}-${String((i % 12) + 1).padStart(2, '0')},${line}`
		);
		const text = `date,${columns.join(',')}\n${body.join('\n')}\n`;
		const start = performance.now();
		expect((await table(text)).periods).toHaveLength(12_000);
		expect(performance.now() - start).toBeLessThan(20_000);
	});
});
