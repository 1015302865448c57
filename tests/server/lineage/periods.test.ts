import { readPeriods } from '$lib/server/lineage/periods';
import { readPeriod } from '$lib/server/lineage/period-text';
import { Rejected } from '$lib/server/lineage/rejected';
import { describe, expect, it } from 'vitest';

const cells = (texts: readonly string[]) => texts.map((text, i) => ({ row: i + 2, text }));
const periods = (texts: readonly string[], order?: 'dmy' | 'mdy') => readPeriods(cells(texts), order);
const refusal = (texts: readonly string[], order?: 'dmy' | 'mdy') => {
	try {
		periods(texts, order);
	} catch (error) {
		if (error instanceof Rejected) return error;
		throw error;
	}
	throw new Error('nothing was refused');
};
const codes = (texts: readonly string[], order?: 'dmy' | 'mdy') =>
	refusal(texts, order).issues.map(({ code }) => code);

describe('readPeriod', () => {
	it.each(['2024Q1', '2024-Q1', '2024 q1', 'Q1 2024', '2024:Q1'])('%s is a quarter', (text) =>
		expect(readPeriod(text)).toEqual({ kind: 'quarter', year: 2024, within: 1 })
	);
	it.each(['2024M03', '2024-03', '2024m3'])('%s is a month', (text) =>
		expect(readPeriod(text)).toEqual({ kind: 'month', year: 2024, within: 3 })
	);
	it('reads midnight as a date and refuses a time', () => {
		expect(readPeriod('2024-03-31T00:00:00Z')).toEqual({ kind: 'date', year: 2024, month: 3, day: 31 });
		expect(readPeriod('2024-03-31 00:00:00')).toEqual({ kind: 'date', year: 2024, month: 3, day: 31 });
		expect(readPeriod('2024-03-31T12:00:00Z')).toEqual({ kind: 'fault', code: 'time' });
		expect(readPeriod('2024-03-31T00:00:00+02:00')).toEqual({ kind: 'fault', code: 'time' });
	});
	it.each(['2024-02-31', '2023-02-29', '2024-13', '2024Q5', '2024-W05', '0000', '2024M13', '', 'spring'])(
		'%s is no period',
		(text) => expect(readPeriod(text)).toEqual({ kind: 'fault', code: 'date' })
	);
	it('knows the day numbers of spreadsheets', () =>
		expect(readPeriod('45382')).toEqual({ kind: 'fault', code: 'looks-like-serials' }));
});

describe('readPeriods', () => {
	it('reads quarters, years and months', () => {
		expect(periods(['1974Q1', '1974Q2', '1974Q3'])).toMatchObject({
			frequency: 'quarterly',
			periods: ['1974-Q1', '1974-Q2', '1974-Q3']
		});
		expect(periods(['1974', '1975', '1976'])).toMatchObject({
			frequency: 'annual',
			periods: ['1974', '1975', '1976']
		});
		expect(periods(['2024-01', '2024-02'])).toMatchObject({
			frequency: 'monthly',
			periods: ['2024-01', '2024-02']
		});
	});
	it('reads the frequency of dates from their distances', () => {
		expect(periods(['2020-03-31', '2020-06-30', '2020-09-30']).periods).toEqual([
			'2020-Q1',
			'2020-Q2',
			'2020-Q3'
		]);
		expect(periods(['2020-01-01', '2020-02-01', '2020-03-01']).frequency).toBe('monthly');
		expect(periods(['2020-12-31', '2021-12-31', '2022-12-31'])).toMatchObject({
			frequency: 'annual',
			periods: ['2020', '2021', '2022']
		});
	});
	it('reads 2024:n as quarters unless an n above 4 says months', () => {
		expect(periods(['2024:1', '2024:2', '2024:4']).frequency).toBe('quarterly');
		expect(periods(['2024:4', '2024:5', '2024:6']).frequency).toBe('monthly');
	});
	it('sorts and says so', () => {
		const read = periods(['2020Q3', '2020Q1', '2020Q2']);
		expect(read.order).toEqual([1, 2, 0]);
		expect(read.notes.map(({ code }) => code)).toEqual(['sorted']);
	});
	it('keeps gaps', () => expect(periods(['2020Q1', '2020Q2', '2021Q1', '2021Q2']).periods).toHaveLength(4));
	it('asks for the order of day and month, and proposes it when a day is above 12', () => {
		const open = refusal(['03/04/2024', '03/05/2024']);
		expect(open.issues[0]).toMatchObject({
			code: 'ambiguous-date',
			row: 2,
			message: expect.stringContaining('3 April 2024 or 4 March 2024') as string
		});
		expect(open.questions[0]).not.toHaveProperty('proposal');
		expect(refusal(['31/03/2024', '30/06/2024']).questions[0]).toMatchObject({
			choice: 'dateOrder',
			proposal: 'dmy'
		});
		expect(periods(['03/04/2024', '03/05/2024', '03/06/2024'], 'dmy').periods).toEqual([
			'2024-04',
			'2024-05',
			'2024-06'
		]);
		expect(codes(['31/03/2024', '30/06/2024'], 'mdy')).toEqual(['date']);
	});
	it('refuses two ways of writing', () => {
		expect(codes(['2024-03-31', '30/06/2024'])).toEqual(['mixed-dates']);
		expect(codes(['31/03/2024', '30.06.2024'], 'dmy')).toEqual(['mixed-dates']);
	});
	it('refuses a period that stands twice, with both rows', () =>
		expect(refusal(['2024Q1', '2024Q2', '2024Q1']).issues[0]).toMatchObject({
			code: 'period-twice',
			row: 4,
			message: '2024-Q1 stands in rows 2 and 4. Keep one.'
		}));
	it('refuses a change of frequency and names the row', () => {
		expect(
			refusal(['2020-03-31', '2020-06-30', '2020-09-30', '2020-10-31', '2020-11-30']).issues[0]
		).toMatchObject({
			code: 'mixed-frequency',
			message: 'Quarterly until row 4, then monthly. Give one frequency in a file.'
		});
		expect(codes(['2020', '2021', '2021Q1'])).toEqual(['mixed-frequency']);
		expect(codes(['2020-01', '2020-02', '2020-03', '2020-06', '2020-09'])).toEqual(['mixed-frequency']);
	});
	it('refuses weekly and half-yearly figures', () => {
		expect(codes(['2024-01-05', '2024-01-12', '2024-01-19', '2024-01-26', '2024-02-02'])).toEqual([
			'not-a-frequency'
		]);
		expect(codes(['2020-06-30', '2020-12-31', '2021-06-30'])).toEqual(['not-a-frequency']);
	});
	it('notes labels of both ends', () =>
		expect(periods(['2020-01-01', '2020-06-30', '2020-07-01']).notes.map(({ code }) => code)).toEqual([
			'labels-mixed'
		]));
	it('reads the 29th of February and years before 100', () => {
		expect(periods(['2024-02-29', '2024-03-31']).frequency).toBe('monthly');
		expect(readPeriod('0099-02-28')).toEqual({ kind: 'date', year: 99, month: 2, day: 28 });
	});
});
