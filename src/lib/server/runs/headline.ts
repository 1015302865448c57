import type { Payload } from '$lib/domain/events';
import type { RunResult } from '$lib/domain/run-result';
import type { Verdict } from '$lib/domain/run';

type Finished = Payload<'run.finished'>;
export type Headline = Finished['headline'];
export type CheckCounts = Finished['checks'];

/** Earlier gaps a list shows beside the last one. */
const earlier = 2;

/** The figures lists show, taken from the whole result; what is not there stays absent. */
export const headlineOf = (result: RunResult): Headline => {
	const { estimates, model } = result;
	const sd = model?.gapSd ?? null;
	const scaled = (model?.gap ?? []).flatMap((gap, i) =>
		gap === null || sd === null || sd === 0 ? [] : [{ period: model!.periods[i]!, gap: gap / sd }]
	);
	const last = scaled.at(-1);
	return {
		...(estimates && {
			n: estimates.equation.fit.n,
			from: estimates.equation.firstPeriod,
			to: estimates.equation.lastPeriod,
			speed: estimates.speed.value,
			...(estimates.speed.se !== null && { speedSe: estimates.speed.se }),
			...(estimates.halfLife.value !== null && { halfLife: estimates.halfLife.value })
		}),
		...(last && {
			gap: last.gap,
			gapPeriod: last.period,
			gapBefore: scaled.slice(-1 - earlier, -1).map(({ gap }) => gap)
		})
	};
};

/** How many checks ended in each verdict. */
export const checkCounts = (result: RunResult): CheckCounts => {
	const of = (verdict: Verdict): number => result.checks.filter((check) => check.verdict === verdict).length;
	return {
		holds: of('holds'),
		query: of('query'),
		fails: of('fails'),
		notAssessable: of('not assessable')
	};
};

export const groupVerdicts = (result: RunResult): Finished['groups'] =>
	result.groups.map(({ group, verdict }) => ({ group, verdict }));
