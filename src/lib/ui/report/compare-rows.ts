/** Two runs side by side, as the page of the comparison is given them. */
import { checkTitle } from '$lib/battery/sentences';
import { groupTitles } from '$lib/battery/words';
import type { Verdict } from '$lib/domain/run';
import type { EquationView } from '../equation';
import type { FieldChange } from '../changes';
import type { Interval } from '../interval';
import { decimalsFor, normal95, pWords, reading } from './figures';

type Figure = number | null;

export interface RunSide {
	readonly ref: string;
	readonly status: string;
	readonly version: string;
	readonly vintage: string;
	readonly digest: string;
	readonly sample: string;
	readonly equation: EquationView;
	readonly decimals: number;
}

export interface Cause {
	readonly cause: string;
	readonly changes: readonly FieldChange[];
}

interface Estimate {
	readonly value: number;
	readonly se: Figure;
}

export interface CoefficientPair {
	readonly code: string;
	readonly name: string;
	readonly a: Estimate | null;
	readonly b: Estimate | null;
	readonly difference: Figure;
}

interface CheckSide {
	readonly verdict: Verdict | null;
	readonly statistic: Figure;
	readonly pValue: Figure;
	readonly pText?: string;
	readonly n: Figure;
}

export interface CheckPair {
	readonly id: string;
	readonly a: CheckSide | null;
	readonly b: CheckSide | null;
	readonly moved: boolean;
}

const nouns: Readonly<Record<string, string>> = {
	data: 'the data',
	sample: 'the sample',
	specification: 'the specification',
	settings: 'the settings of the run',
	policy: 'the policy',
	tier: 'the tier',
	seed: 'the seed',
	engine: 'the engine'
};

const listed = (words: readonly string[]): string =>
	words.length < 2 ? words.join('') : `${words.slice(0, -1).join(', ')} and ${words.at(-1)}`;

/** The head line: what was not the same, and whether the results are. */
export function causeSentence(causes: readonly Cause[], digest: 'equal' | 'different'): string {
	const what = listed(causes.map(({ cause }) => nouns[cause] ?? cause));
	if (causes.length === 0)
		return digest === 'equal'
			? 'Nothing that a result depends on differs, and the two results have one digest.'
			: 'Nothing that a result depends on differs, and yet the digests do: one of the two was not computed as recorded.';
	const results = digest === 'equal' ? 'the results are equal all the same' : 'the results differ';
	return `Not the same: ${what}; ${results}.`;
}

export const capital = (words: string): string => words.charAt(0).toUpperCase() + words.slice(1);
export const causeTitle = (cause: string): string => capital((nouns[cause] ?? cause).replace('the ', ''));

export function intervalOf(side: Estimate | null): Interval | undefined {
	if (!side) return undefined;
	const half = normal95 * (side.se ?? 0);
	return { value: side.value, low: side.value - half, high: side.value + half };
}

/** Decimals at which the smallest standard error of both runs shows three digits. */
export const pairDecimals = (pairs: readonly CoefficientPair[]): number =>
	decimalsFor(
		pairs.flatMap(({ a, b }) => [a?.se, b?.se]),
		3
	);

export interface CheckPairRow {
	readonly id: string;
	readonly title: string;
	readonly moved: boolean;
	readonly sides: readonly {
		readonly present: boolean;
		readonly verdict: Verdict | null;
		readonly statistic: string | null;
		readonly p: string | null;
		readonly n: Figure;
	}[];
}

function sideOf(side: CheckSide | null): CheckPairRow['sides'][number] {
	if (!side) return { present: false, verdict: null, statistic: null, p: null, n: null };
	const { verdict, statistic, pValue, pText, n } = side;
	return {
		present: true,
		verdict,
		statistic: statistic === null ? null : reading(statistic),
		p: pWords({ ...(pValue !== null && { pValue }), ...(pText !== undefined && { pText }) }),
		n
	};
}

export interface CheckPairGroup {
	readonly title: string;
	readonly rows: readonly CheckPairRow[];
}

/** Checks of either run by group, in the order of the first. */
export function checkPairGroups(pairs: readonly CheckPair[]): readonly CheckPairGroup[] {
	const groupOf = ({ id }: CheckPair): string => id.split('.')[0]!;
	return [...new Set(pairs.map(groupOf))].map((group) => ({
		title: groupTitles[group] ?? group,
		rows: pairs
			.filter((pair) => groupOf(pair) === group)
			.map(({ id, a, b, moved }) => ({ id, title: checkTitle(id), moved, sides: [sideOf(a), sideOf(b)] }))
	}));
}
