import { readFileSync } from 'node:fs';
import { parse } from 'csv-parse/sync';
import { engineVersion } from '$lib/battery/engine';
import { runBattery } from '$lib/battery/run-battery';
import type { RunRequest } from '$lib/domain/run';
import type { RunResult } from '$lib/domain/run-result';
import type { Specification } from '$lib/domain/specification';
import { latestRelease } from '$lib/server/policy/released';
import type { RunFacts } from '$lib/ui/report/run-facts';

const folder = new URL('../fixtures/example/', import.meta.url);
const text = (name: string): string => readFileSync(new URL(name, folder), 'utf8');

/** US consumption, income and the short rate, 1959-Q1 to 2009-Q3. */
export const specification = JSON.parse(text('us-consumption.json')) as Specification;
/** The same over seven quarters: too few to estimate anything. */
export const shortSpecification: Specification = {
	...specification,
	sample: { from: '2008-Q1', to: '2009-Q3' }
};
/** The same without claims. */
export const unclaimedSpecification: Specification = Object.fromEntries(
	Object.entries(specification).filter(([key]) => key !== 'claimed')
) as Specification;

const data = () => {
	const [head, ...rows] = parse(text('us-consumption.csv')) as string[][];
	const column = (i: number) => rows.map((row) => Number(row[i]));
	return {
		frequency: 'quarterly' as const,
		periods: rows.map((row) => row[0]!),
		columns: head!.slice(1).map((name, i) => ({ name, values: column(i + 1) }))
	};
};

/** A request of the example under the newest release, with what a test changes. */
export const requested = (changes: Partial<RunRequest> = {}): RunRequest => ({
	specification,
	vintage: `sha256:${'a'.repeat(64)}`,
	policy: latestRelease().digest,
	tier: 1,
	settings: [],
	seed: 1,
	purpose: 'planned',
	engine: engineVersion,
	...changes
});

/** The result of such a request. */
export const computed = (changes: Partial<RunRequest> = {}): RunResult =>
	runBattery(requested(changes), latestRelease().policy, data());

/** A finished run that a result belongs to. */
export const facts = (changes: Partial<RunFacts> = {}): RunFacts => ({
	ref: 'R-0207',
	model: 'M-014',
	version: 'M-014/3',
	vintage: 'D-0051/2',
	file: `sha256:${'f'.repeat(64)}`,
	table: `sha256:${'a'.repeat(64)}`,
	policy: latestRelease().digest,
	tier: 1,
	purpose: 'planned',
	settings: [],
	seed: 1,
	engine: '1.0.0',
	request: `sha256:${'b'.repeat(64)}`,
	state: 'finished',
	requestedBy: 'I. Marrow',
	requestedAt: '2026-11-19T09:58:00Z',
	endedAt: '2026-11-19T09:58:02Z',
	resultDigest: `sha256:${'c'.repeat(64)}`,
	reruns: { nth: 3, of: 3, refs: ['R-0199', 'R-0201', 'R-0207'], digest: 'equal' },
	entry: 10482,
	mayCancel: false,
	...changes
});
