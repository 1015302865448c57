import type { Data } from '$lib/battery/data';
import { engineVersion } from '$lib/battery/engine';
import { parseLock, releasedPolicy } from '$lib/battery/policy-file';
import { periodText, type Frequency } from '$lib/domain/period';
import type { Policy } from '$lib/domain/policy';
import type { RunRequest } from '$lib/domain/run';
import type { Check, Part, RunResult } from '$lib/domain/run-result';
import type { Specification } from '$lib/domain/specification';
import { readFileSync } from 'node:fs';
import { listOf, type Case, type EcmModel } from '../reference/reference';

const folder = new URL('../../policies/', import.meta.url);
const lock = parseLock(readFileSync(new URL('LOCK', folder), 'utf8'));
const release = '2026-12-01.yaml';

/** The first released policy, read from its file. */
export const first = releasedPolicy(release, readFileSync(new URL(release, folder), 'utf8'), lock);
export const policy: Policy = first.policy;

const frequencies: Readonly<Record<number, Frequency>> = { 1: 'annual', 4: 'quarterly', 12: 'monthly' };

/** First period of a case; cases that only count observations begin with the year 1900. */
const firstIndex = (of: Case): number => {
	const text = (of as unknown as { window?: { first?: string } }).window?.first ?? '1900';
	const [year, within = '1'] = text.split(/[QM-]+/);
	return Number(year) * of.frequency! + Number(within) - 1;
};

/** The transformed, complete sample of a reference case as a table. */
export const caseData = (of: Case): Data => {
	const frequency = frequencies[of.frequency!]!;
	const model = of.model as EcmModel;
	const start = firstIndex(of);
	return {
		frequency,
		periods: Array.from({ length: of.T }, (_, i) => periodText(start + i, frequency)),
		columns: [model.y, ...listOf(model.x)].map((name) => ({
			name,
			values: of.series[name] as readonly number[]
		}))
	};
};

/** The model of a reference case as a specification. */
export const caseSpecification = (of: Case, kind: 'one-step' | 'two-step'): Specification => {
	const model = of.model as EcmModel;
	const data = caseData(of);
	const q = listOf(model.q);
	const x = listOf(model.x);
	const lags = (from: number, to: number): number[] =>
		Array.from({ length: to - from + 1 }, (_, i) => from + i);
	return {
		schema: 1,
		frequency: data.frequency,
		series: data.columns.map(({ name }) => ({ name, column: name, unit: 'as in the source', transform: [] })),
		dependent: model.y,
		longRun: {
			drivers: x.map((series) => ({
				series,
				sign: 'any',
				plausible: [-1e6, 1e6],
				rationale: 'reference case'
			})),
			constant: true,
			trend: model.det === 'ct'
		},
		shortRun: {
			own: lags(1, model.p),
			drivers: x.map((series, j) => ({ series, lags: lags(0, q[j]!), sign: 'any' })),
			constant: kind === 'two-step'
		},
		dummies: [],
		fixed: [],
		sample: { from: data.periods[0]!, to: data.periods.at(-1)! },
		estimator: { kind },
		standardErrors: 'ols'
	};
};

/** A request of the specification under the first policy. */
export const requestOf = (specification: Specification, more: Partial<RunRequest> = {}): RunRequest => ({
	specification,
	vintage: `sha256:${'0'.repeat(64)}`,
	policy: first.digest,
	tier: 1,
	settings: [],
	seed: 20261201,
	purpose: 'exploratory',
	engine: engineVersion,
	...more
});

export const checkIn = (result: RunResult, id: string): Check => {
	const check = result.checks.find((each) => each.id === id);
	if (!check) throw new Error(`The result has no check ${id}.`);
	return check;
};

export const partIn = (check: Check, about: string, parameters: Record<string, unknown> = {}): Part => {
	const part = check.parts?.find(
		(each) =>
			each.about === about &&
			Object.entries(parameters).every(([name, value]) => each.parameters?.[name] === value)
	);
	if (!part) throw new Error(`${check.id} has no part ${about} ${JSON.stringify(parameters)}.`);
	return part;
};
