/** The rows of the table of checks, from a run result. */
import { groupSentence } from '$lib/battery/model-sentences';
import { checkSentence, checkTitle } from '$lib/battery/sentences';
import { groupTitles, nullWords } from '$lib/battery/words';
import type { Verdict } from '$lib/domain/run';
import type { Check, Part, RunResult } from '$lib/domain/run-result';
import { criticalOf, criticalOfPart, type Critical } from './critical';
import { aligned, pWords, reading, tied } from './figures';
import { codeWords, parameterWords } from './parameters';

/** The figures of a check, or of one of its parts, as a table shows them. */
export interface Figures {
	readonly statistic: string | null;
	readonly statisticName: string | null;
	readonly critical: Critical | null;
	readonly p: string | null;
	readonly n: number | null;
}

export interface PartRow extends Figures {
	readonly about: string;
	readonly verdict: Verdict | null;
	readonly reason: string | null;
	readonly parameters: readonly string[];
}

export interface CheckRow extends Figures {
	readonly id: string;
	/** Id of its row on the page. */
	readonly anchor: string;
	readonly title: string;
	readonly sentence: string;
	/** Null: shown only, judged elsewhere. */
	readonly verdict: Verdict | null;
	readonly nullHypothesis: string | null;
	readonly source: string;
	/** Paths of policy lines. */
	readonly thresholds: readonly string[];
	readonly parameters: readonly string[];
	readonly parts: readonly PartRow[];
	/** What the policy's own settings give, where this run replaced one. */
	readonly byDefault: string | null;
}

export interface GroupRows {
	readonly group: string;
	readonly title: string;
	/** Null where the group is shown, not judged. */
	readonly verdict: Verdict | null;
	readonly sentence: string;
	readonly rows: readonly CheckRow[];
}

/** The family of checks judges no model: it stands below the table. */
const familyGroup = 'family';

export const anchorOf = (id: string): string => `check-${id.replaceAll('.', '-')}`;

function figuresOf(of: Check | Part, critical: Critical | null): Figures {
	const value = of.statistic?.value ?? null;
	return {
		statistic: value === null ? null : reading(value),
		statisticName: of.statistic?.name ?? null,
		critical,
		p: pWords(of),
		n: of.n ?? null
	};
}

function partRow(part: Part): PartRow {
	const critical = criticalOfPart(part);
	return {
		...figuresOf(part, critical),
		about: codeWords(part.about),
		verdict: part.verdict ?? null,
		reason: part.detail ?? null,
		parameters: parameterWords(part.parameters, critical?.from)
	};
}

function defaultWords({ byDefault }: Check): string | null {
	if (!byDefault) return null;
	const { verdict, statistic, pValue } = byDefault;
	const p = pValue === null ? null : pWords({ pValue });
	return [
		verdict ?? 'shown',
		...(statistic === null ? [] : [reading(statistic)]),
		...(p === null ? [] : [`p ${p.startsWith('<') ? p : `= ${p}`}`])
	].join(', ');
}

/** One check as a row; the parts of a replication have a table of their own. */
export function checkRow(check: Check): CheckRow {
	const critical = criticalOf(check);
	const { id, source, nullHypothesis: code } = check;
	return {
		...figuresOf(check, critical),
		id,
		anchor: anchorOf(id),
		title: checkTitle(id),
		sentence: tied(checkSentence(check)),
		verdict: check.verdict,
		nullHypothesis: code === undefined ? null : (nullWords[code] ?? code),
		source,
		thresholds: check.thresholdFrom,
		parameters: parameterWords(check.parameters, critical?.from),
		parts: check.group === 'replication' ? [] : alignedRows((check.parts ?? []).map(partRow)),
		byDefault: defaultWords(check)
	};
}

/** The points of a column of statistics stand below each other. */
function alignedRows<Row extends Figures>(rows: readonly Row[]): readonly Row[] {
	const statistics = aligned(rows.map(({ statistic }) => statistic ?? ''));
	return rows.map((row, i) => ({ ...row, statistic: row.statistic === null ? null : statistics[i]! }));
}

/** All judged checks by group, in the order of the result. */
export function groupRows({ checks, groups }: Pick<RunResult, 'checks' | 'groups'>): readonly GroupRows[] {
	const names = [...new Set(checks.map(({ group }) => group))].filter((name) => name !== familyGroup);
	const rows = alignedRows(checks.map(checkRow));
	return names.map((name) => {
		const group = groups.find((each) => each.group === name);
		return {
			group: name,
			title: groupTitles[name] ?? name,
			verdict: group?.verdict ?? null,
			sentence: group ? groupSentence(group) : '',
			rows: rows.filter((_, i) => checks[i]!.group === name)
		};
	});
}

/** What is open, the gravest first: every judged check that is not *holds*. */
export function openChecks(
	checks: readonly Check[]
): readonly { verdict: Verdict; rows: readonly CheckRow[] }[] {
	const grave: readonly Verdict[] = ['fails', 'query', 'not assessable'];
	return grave
		.map((verdict) => ({ verdict, rows: checks.filter((check) => check.verdict === verdict).map(checkRow) }))
		.filter(({ rows }) => rows.length > 0);
}
