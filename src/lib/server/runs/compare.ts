import { fieldDifferences, type FieldDifference } from '$lib/domain/register-differences';
import { readableSpecification, sampleFields } from '$lib/domain/register-readable';
import { termName } from '$lib/domain/register-term-names';
import type { Actor } from '$lib/domain/actor';
import type { RunRequest, Verdict } from '$lib/domain/run';
import type { Check, Figure, RunResult, TermEstimate } from '$lib/domain/run-result';
import type { Ctx } from '../context';
import { requestOf, resultOf, runOf, type RunView } from './run-view';

/** A run with what it was asked and what came out. */
export interface RunEvidence {
	readonly view: RunView;
	readonly request: RunRequest;
	readonly result: RunResult;
}

/** Everything of a finished run that a comparison needs. */
export const runEvidence = (ctx: Ctx, actor: Actor, ref: string): RunEvidence =>
	Object.freeze({
		view: runOf(ctx, actor, ref),
		request: requestOf(ctx, actor, ref),
		result: resultOf(ctx, actor, ref)
	});

export const causes = [
	'data',
	'sample',
	'specification',
	'settings',
	'policy',
	'tier',
	'seed',
	'engine'
] as const;
export type Cause = (typeof causes)[number];

/** Why two results can differ: one thing that was not the same, field by field. */
export interface CauseOfDifference {
	readonly cause: Cause;
	readonly changes: readonly FieldDifference[];
}

export interface CoefficientPair {
	readonly code: string;
	readonly name: string;
	readonly part: 'long' | 'short' | 'speed';
	readonly a: { readonly value: number; readonly se: Figure } | null;
	readonly b: { readonly value: number; readonly se: Figure } | null;
	/** b − a, where both are there. */
	readonly difference: number | null;
}

interface CheckSide {
	readonly verdict: Verdict | null;
	readonly statistic: Figure;
	readonly pValue: number | null;
	readonly pText?: string;
	readonly n: number | null;
}

export interface CheckPair {
	readonly id: string;
	readonly a: CheckSide | null;
	readonly b: CheckSide | null;
	/** The verdicts differ, or only one of the runs has the check. */
	readonly moved: boolean;
}

export interface RunComparison {
	readonly a: string;
	readonly b: string;
	/** The digests of the two results. */
	readonly digest: 'equal' | 'different';
	/** Empty when nothing differed: the results must then be equal. */
	readonly causes: readonly CauseOfDifference[];
	readonly coefficients: readonly CoefficientPair[];
	readonly checks: readonly CheckPair[];
}

const causesOf = (a: RunEvidence, b: RunEvidence): CauseOfDifference[] => {
	const specification = fieldDifferences(
		readableSpecification(a.request.specification),
		readableSpecification(b.request.specification)
	);
	const ofSample = ({ field }: FieldDifference): boolean => sampleFields.includes(field);
	const settings = ({ request }: RunEvidence) =>
		Object.fromEntries(request.settings.map(({ setting, value }) => [setting, value]));
	const data = ({ view }: RunEvidence) => ({ vintage: view.vintage, file: view.file });
	const pairs: Record<Cause, readonly FieldDifference[]> = {
		// The table decides; two files may hold the same numbers.
		data: a.request.vintage === b.request.vintage ? [] : fieldDifferences(data(a), data(b)),
		sample: specification.filter(ofSample),
		specification: specification.filter((difference) => !ofSample(difference)),
		settings: fieldDifferences(settings(a), settings(b)),
		policy: fieldDifferences({ policy: a.request.policy }, { policy: b.request.policy }),
		tier: fieldDifferences({ tier: a.request.tier }, { tier: b.request.tier }),
		seed: fieldDifferences({ seed: a.request.seed }, { seed: b.request.seed }),
		engine: fieldDifferences({ engine: a.request.engine }, { engine: b.request.engine })
	};
	return causes
		.map((cause) => ({ cause, changes: pairs[cause] }))
		.filter(({ changes }) => changes.length > 0);
};

type Side = CoefficientPair['a'];

interface Line {
	readonly code: string;
	readonly name: string;
	readonly part: CoefficientPair['part'];
	readonly value: number;
	readonly se: Figure;
}

const linesOf = ({ result }: RunEvidence): Line[] => {
	if (!result.estimates) return [];
	const { speed, longRun, equation } = result.estimates;
	const line = ({ term, value, se }: TermEstimate): Line => ({
		code: `${term.part}:${term.code}`,
		name: termName(term),
		part: term.part,
		value,
		se
	});
	return [
		{ code: 'speed', name: 'speed of adjustment', part: 'speed', value: speed.value, se: speed.se },
		...longRun.map(line),
		...equation.terms.filter(({ term }) => term.kind !== 'gap').map(line)
	];
};

const coefficientsOf = (a: RunEvidence, b: RunEvidence): CoefficientPair[] => {
	const [left, right] = [linesOf(a), linesOf(b)];
	const side = (lines: readonly Line[], code: string): Side => {
		const found = lines.find((line) => line.code === code);
		return found ? { value: found.value, se: found.se } : null;
	};
	const all = [...left, ...right.filter(({ code }) => !left.some((line) => line.code === code))];
	return all.map(({ code, name, part }) => {
		const [sideA, sideB] = [side(left, code), side(right, code)];
		const difference = sideA && sideB ? sideB.value - sideA.value : null;
		return { code, name, part, a: sideA, b: sideB, difference };
	});
};

const checkSide = (check: Check | undefined): CheckSide | null =>
	check
		? {
				verdict: check.verdict,
				statistic: check.statistic?.value ?? null,
				pValue: check.pValue ?? null,
				...(check.pText !== undefined && { pText: check.pText }),
				n: check.n ?? null
			}
		: null;

const checksOf = (a: RunEvidence, b: RunEvidence): CheckPair[] => {
	const ids = [...new Set([...a.result.checks, ...b.result.checks].map(({ id }) => id))];
	const of = (evidence: RunEvidence, id: string): CheckSide | null =>
		checkSide(evidence.result.checks.find((check) => check.id === id));
	return ids.map((id) => {
		const [sideA, sideB] = [of(a, id), of(b, id)];
		return { id, a: sideA, b: sideB, moved: sideA?.verdict !== sideB?.verdict };
	});
};

/** Two runs side by side: what was not the same, then coefficient by coefficient and check by check. */
export const compareRuns = (a: RunEvidence, b: RunEvidence): RunComparison =>
	Object.freeze({
		a: a.view.ref,
		b: b.view.ref,
		digest: a.result.digest === b.result.digest ? 'equal' : 'different',
		causes: causesOf(a, b),
		coefficients: coefficientsOf(a, b),
		checks: checksOf(a, b)
	});
