import { parseUpload } from '$lib/server/lineage/parse';
import type { Choices } from '$lib/domain/lineage';
import { writeXlsx } from 'hucre/xlsx';
import { describe, expect, it } from 'vitest';

const fixed = { created: new Date(0), modified: new Date(0) };
type Rows = (string | number | Date | boolean | null)[][];
const book = (sheets: { name: string; rows: Rows }[]): Promise<Uint8Array> =>
	writeXlsx({ sheets, properties: fixed });

const quarter = (i: number): Date => new Date(Date.UTC(2020, i * 3, 1));
const rows: Rows = [
	['date', 'gdp', 'rate'],
	...Array.from({ length: 6 }, (_, i) => [
		quarter(i),
		100.123456789012 + i ** 2,
		i === 2 ? null : 0.035 + i / 7
	])
];

const read = async (bytes: Uint8Array, choices: Choices = {}) => parseUpload({ bytes, choices });
const table = async (bytes: Uint8Array, choices: Choices = {}) => {
	const outcome = await read(bytes, choices);
	if (outcome.state !== 'parsed') throw new Error(outcome.issues.map(({ message }) => message).join('\n'));
	return outcome.table;
};

describe('XLSX', () => {
	it('reads dates by their style and figures at full precision', async () => {
		const read = await table(await book([{ name: 'Data', rows }]));
		expect(read.frequency).toBe('quarterly');
		expect(read.periods[0]).toBe('2020-Q1');
		expect(read.columns.map(({ name }) => name)).toEqual(['gdp', 'rate']);
		expect(read.columns[0]?.values[1]).toBe(101.123456789012);
		expect(read.columns[1]?.values[0]).toBe(0.035);
		expect(read.columns[1]?.values[2]).toBeNull();
	});
	it('asks which sheet, and reads the one chosen', async () => {
		const bytes = await book([
			{ name: 'Notes', rows: [['Source: the statistical office']] },
			{ name: 'Figures', rows }
		]);
		expect(await read(bytes)).toMatchObject({
			state: 'question',
			questions: [{ choice: 'sheet', options: [{ value: 'Notes' }, { value: 'Figures' }] }]
		});
		expect((await table(bytes, { sheet: 'Figures' })).periods).toHaveLength(6);
		expect(await read(bytes, { sheet: 'None' })).toMatchObject({ state: 'question' });
	});
	it('reads years kept as numbers and periods kept as text', async () => {
		const years: Rows = [['year', 'x'], ...[2001, 2002, 2003, 2004].map((year) => [year, year / 3])];
		expect((await table(await book([{ name: 'S', rows: years }]))).frequency).toBe('annual');
		const texts: Rows = [['p', 'x'], ...['2001Q1', '2001Q2', '2001Q3', '2001Q4'].map((p, i) => [p, i ** 2])];
		expect((await table(await book([{ name: 'S', rows: texts }]))).frequency).toBe('quarterly');
	});
	it('reads numbers kept as text, with a note', async () => {
		const texts: Rows = [['year', 'x'], ...[2001, 2002, 2003, 2004].map((year) => [year, `${year / 4}`])];
		const read = await table(await book([{ name: 'S', rows: texts }]));
		expect(read.columns[0]?.values[1]).toBe(500.5);
		expect(read.notes.map(({ code }) => code)).toContain('text-numbers');
	});
	it('refuses truth values among figures', async () => {
		const mixed: Rows = [
			['year', 'x'],
			...[2001, 2002, 2003, 2004].map((year) => [year, year === 2003 ? true : 1])
		];
		expect(await read(await book([{ name: 'S', rows: mixed }]))).toMatchObject({
			state: 'refused',
			issues: [{ code: 'number', row: 4, column: 'x' }]
		});
	});
	it('refuses unformatted day numbers', async () => {
		const serials: Rows = [['date', 'x'], ...[45292, 45383, 45474, 45566].map((serial) => [serial, 1.5])];
		expect(await read(await book([{ name: 'S', rows: serials }]))).toMatchObject({
			issues: [{ code: 'looks-like-serials', row: 2 }, {}, {}, {}]
		});
	});
});
