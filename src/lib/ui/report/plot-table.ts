/** The numbers behind the plots and tables of a report, at full precision, as rows of a CSV. */
import { termName } from '$lib/domain/register-term-names';
import type { Check, CheckPlot, Part, RunResult } from '$lib/domain/run-result';

export const plots = [
	'level',
	'gap',
	'cusum',
	'cusumsq',
	'sup-f',
	'acf',
	'residuals',
	'checks',
	'replication',
	'estimates'
] as const;
export type Plot = (typeof plots)[number];

export const isPlot = (text: string): text is Plot => (plots as readonly string[]).includes(text);

type Cell = string | number | null;
export interface PlotTable {
	readonly header: readonly string[];
	readonly rows: readonly (readonly Cell[])[];
}

function ofModel({ model }: RunResult, plot: 'level' | 'gap' | 'residuals'): PlotTable | null {
	if (!model) return null;
	const { periods, level, longRun, gap, residuals, gapSd } = model;
	if (plot === 'level')
		return {
			header: ['period', 'level', 'long run'],
			rows: periods.map((period, i) => [period, level[i]!, longRun[i]!])
		};
	if (plot === 'gap')
		return {
			header: ['period', 'gap', 'gap in standard deviations'],
			rows: periods.map((period, i) => [period, gap[i]!, gap[i] == null || !gapSd ? null : gap[i]! / gapSd])
		};
	return { header: ['period', 'residual'], rows: periods.map((period, i) => [period, residuals[i]!]) };
}

function ofCheckPlot(plot: CheckPlot): PlotTable {
	switch (plot.kind) {
		case 'acf':
			return {
				header: ['lag', 'autocorrelation', 'bound'],
				rows: plot.acf.map((value, i) => [i + 1, value, plot.bound])
			};
		case 'cusum':
			return {
				header: ['period', 'path', 'lower bound', 'upper bound'],
				rows: plot.periods.map((period, i) => [period, plot.path[i]!, -plot.bound[i]!, plot.bound[i]!])
			};
		case 'cusumsq':
			return {
				header: ['period', 'path', 'lower bound', 'upper bound'],
				rows: plot.periods.map((period, i) => [period, plot.path[i]!, plot.lower[i]!, plot.upper[i]!])
			};
		case 'sup-f':
			return {
				header: ['period', 'F', '5 % critical value of the largest'],
				rows: plot.periods.map((period, i) => [period, plot.path[i]!, plot.critical])
			};
	}
}

const figuresOf = (of: Check | Part): Cell[] => [
	of.verdict ?? null,
	of.statistic?.name ?? null,
	of.statistic?.value ?? null,
	of.criticalValues?.find(({ level }) => level === '5%')?.value ?? null,
	of.pValue ?? null,
	of.pText ?? null,
	of.n ?? null,
	of.reason ?? null
];

function checkTable({ checks }: RunResult): PlotTable {
	return {
		header: [
			'check',
			'part',
			'verdict',
			'statistic',
			'value',
			'5 % critical value',
			'p',
			'p bracket',
			'n',
			'reason',
			'null hypothesis',
			'source',
			'policy lines'
		],
		rows: checks.flatMap((check) => [
			[
				check.id,
				null,
				...figuresOf(check),
				check.nullHypothesis ?? null,
				check.source,
				check.thresholdFrom.join(' ')
			],
			...(check.parts ?? []).map((part) => [check.id, part.about, ...figuresOf(part), null, null, null])
		])
	};
}

function replicationTable({ replication }: RunResult): PlotTable | null {
	if (replication.length === 0) return null;
	return {
		header: [
			'coefficient',
			'claimed',
			'claimed s.e.',
			'this run',
			's.e.',
			'difference',
			'tolerance',
			'replicates'
		],
		rows: replication.map((row) => [
			termName(row.term),
			row.claimed,
			row.claimedSe ?? null,
			row.ours,
			row.oursSe,
			row.difference,
			row.tolerance,
			row.replicates === null ? null : row.replicates ? 'yes' : 'no'
		])
	};
}

function estimateTable({ estimates }: RunResult): PlotTable | null {
	if (!estimates) return null;
	const { speed, longRun, equation } = estimates;
	return {
		header: ['part', 'term', 'estimate', 's.e.', 't', 'p'],
		rows: [
			...longRun.map(({ term, value, se, t, p }) => ['long run', termName(term), value, se, t, p]),
			['adjustment', 'speed of adjustment', speed.value, speed.se, speed.t, speed.p],
			...equation.terms.map(({ term, value, se, t, p }) => ['equation', termName(term), value, se, t, p])
		]
	};
}

/** The table of a plot; null where the run has none. */
export function plotTable(result: RunResult, plot: Plot): PlotTable | null {
	switch (plot) {
		case 'level':
		case 'gap':
		case 'residuals':
			return ofModel(result, plot);
		case 'checks':
			return checkTable(result);
		case 'replication':
			return replicationTable(result);
		case 'estimates':
			return estimateTable(result);
		default: {
			const found = result.checks.find((check) => check.plot?.kind === plot)?.plot;
			return found ? ofCheckPlot(found) : null;
		}
	}
}
