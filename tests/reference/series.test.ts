import { parse } from 'csv-parse/sync';
import { describe, expect, it } from 'vitest';
import { timelineOf } from '$lib/econometrics/series/timeline';
import { completeCases, transform } from '$lib/econometrics/series/transform';
import type { TransformStep } from '$lib/econometrics/series/transform-step';
import { caseNames, loadCase, loadCsv, must, seriesOf, type Case } from './reference';

/** The transforms of the cases as steps. */
const STEPS: Readonly<Record<string, readonly TransformStep[]>> = {
	level: [],
	log: [{ step: 'log' }]
};

type Row = Readonly<Record<string, string>>;

const rowsOf = (of: Case): Row[] => parse(loadCsv(of.csv), { columns: true });

/** Cases without dates are cross-sections in some order; any consecutive periods serve. */
const periodsOf = (of: Case, rows: readonly Row[]): string[] =>
	rows.map((row, i) => (of.frequency === undefined ? String(1001 + i) : row.date!));

const columnOf = (rows: readonly Row[], name: string): (number | null)[] =>
	rows.map((row) => (row[name] === '' || row[name] === 'NA' ? null : Number(row[name])));

describe('the sample of a case follows from its raw file', () => {
	it.each(caseNames)('%s', (name) => {
		const of = loadCase(name);
		const rows = rowsOf(of);
		const timeline = must(timelineOf(periodsOf(of, rows)));
		if (of.frequency !== undefined) expect(timeline.perYear).toBe(of.frequency);
		const kinds = Object.entries(of.transforms);
		const transformed = kinds.map(([series, kind]) =>
			must(transform(series, columnOf(rows, series), STEPS[kind]!, timeline, new Map()))
		);
		const samples = must(completeCases(transformed));
		for (const [i, [series]] of kinds.entries()) {
			const expected = seriesOf(of, series);
			expect(expected).toHaveLength(of.T);
			expect(samples[i]).toHaveLength(of.T);
			const worst = Math.max(
				...samples[i]!.map((v, t) => Math.abs(v - expected[t]!) / Math.abs(expected[t]! || 1))
			);
			expect(worst, series).toBeLessThan(1e-13);
		}
	});

	it('takes both levels and logarithms', () => {
		const used = new Set(caseNames.flatMap((name) => Object.values(loadCase(name).transforms)));
		expect([...used].sort()).toEqual(['level', 'log']);
	});
});
