import { describe, expect, it } from 'vitest';
import { isPlot, plots, plotTable } from '$lib/ui/report/plot-table';
import { computed, shortSpecification, unclaimedSpecification } from './report-result';

const result = computed();

describe('numbers behind plots and tables', () => {
	it.each(plots)('%s: rows as wide as their head, full precision', (plot) => {
		const { header, rows } = plotTable(result, plot)!;
		expect(rows.length).toBeGreaterThan(0);
		for (const row of rows) expect(row).toHaveLength(header.length);
	});

	it('gives the very figures of the result', () => {
		expect(plotTable(result, 'residuals')!.rows.map(([, residual]) => residual)).toEqual(
			result.model!.residuals
		);
		const path = result.checks.flatMap(({ plot }) => (plot?.kind === 'sup-f' ? plot.path : []));
		expect(plotTable(result, 'sup-f')!.rows.map(([, f]) => f)).toEqual(path);
		const gap = plotTable(result, 'gap')!.rows.at(-1)!;
		expect(gap[2]).toBeCloseTo(result.model!.gap.at(-1)! / result.model!.gapSd!, 12);
	});

	it('lists every check and each of its parts', () => {
		const expected = result.checks.reduce((sum, { parts }) => sum + 1 + (parts?.length ?? 0), 0);
		expect(plotTable(result, 'checks')!.rows).toHaveLength(expected);
	});

	it('keeps a claim as it was typed', () => {
		expect(plotTable(result, 'replication')!.rows.map(([, claimed]) => claimed)).toContain('-0.118');
	});

	it('has no table where the run has no such figures, and knows its names', () => {
		expect(plotTable(computed({ specification: unclaimedSpecification }), 'replication')).toBeNull();
		const short = computed({ specification: shortSpecification });
		for (const plot of ['estimates', 'cusum'] as const) expect(plotTable(short, plot)).toBeNull();
		expect(isPlot('level')).toBe(true);
		expect(isPlot('toString')).toBe(false);
	});
});
