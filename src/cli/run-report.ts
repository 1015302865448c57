import { pFigure, significant } from '$lib/battery/figures';
import { companionSentence, groupSentence, speedSentence } from '$lib/battery/model-sentences';
import { checkSentence, checkTitle } from '$lib/battery/sentences';
import { groupTitles, reasonWords } from '$lib/battery/words';
import type { Estimates, RunResult, TermEstimate } from '$lib/domain/run-result';
import type { SpecificationTerm } from '$lib/domain/specification-terms';

/** A term as a line of text can write it. */
const termText = ({ kind, series, lag }: SpecificationTerm): string => {
	const at = lag === 0 ? '(t)' : `(t-${lag})`;
	switch (kind) {
		case 'constant':
			return 'constant';
		case 'trend':
			return 'trend';
		case 'gap':
			return `gap${at}`;
		case 'level':
		case 'dummy':
			return `${series}${at}`;
		case 'difference':
			return `change of ${series}${at}`;
	}
};

const columns = (rows: readonly (readonly string[])[]): string[] => {
	const widths = rows[0]!.map((_, j) => Math.max(...rows.map((row) => row[j]!.length)));
	return rows.map((row) =>
		row.map((cell, j) => (j === row.length - 1 ? cell : cell.padEnd(widths[j]!))).join('  ')
	);
};

const estimateRow = ({ term, value, se, p }: TermEstimate): string[] => [
	`  ${termText(term)}`,
	significant(value, 5),
	se === null ? '' : `(${significant(se)})`,
	p === null ? '' : pFigure(p)
];

const estimateLines = (estimates: Estimates, result: RunResult): string[] => {
	const { equation } = estimates;
	const { specification } = result;
	return [
		`Long run of ${specification.dependent}`,
		...columns(estimates.longRun.map(estimateRow)),
		`Change of ${specification.dependent}, ${equation.firstPeriod} to ${equation.lastPeriod}, n = ${equation.fit.n}`,
		...columns(equation.terms.map(estimateRow)),
		speedSentence(estimates, specification.frequency)
	];
};

const replicationLines = ({ replication }: RunResult): string[] =>
	replication.length === 0
		? []
		: [
				'Claimed coefficients',
				...columns(
					replication.map(({ term, claimed, ours, replicates }) => [
						`  ${termText(term)}${term.part === 'long' ? ', long run' : ''}`,
						claimed,
						ours === null ? '' : significant(ours, 6),
						replicates ? 'replicates' : replicates === null ? '' : 'does not replicate'
					])
				),
				''
			];

/** The result of a run as a table in plain text. */
export const reportText = (result: RunResult, released: boolean): string => {
	const { request, estimates, refused } = result;
	const lines = [
		...(estimates
			? estimateLines(estimates, result)
			: [`Nothing was estimated: ${refused ? `${reasonWords[refused.reason]} (${refused.detail})` : ''}`]),
		...result.companions.map(companionSentence),
		'',
		...replicationLines(result),
		...columns(
			result.groups.map((group) => [
				groupTitles[group.group] ?? group.group,
				group.verdict,
				groupSentence(group)
			])
		),
		'',
		...columns(
			result.checks.map((check) => [checkTitle(check.id), check.verdict ?? 'shown', checkSentence(check)])
		),
		'',
		`Policy ${request.policyRelease}${released ? '' : ' (not a released file)'} ${request.policy}`,
		`Data ${request.vintage}`,
		`Engine ${request.engine}, seed ${request.seed}`,
		`Result ${result.digest}`,
		''
	];
	return lines.join('\n');
};
