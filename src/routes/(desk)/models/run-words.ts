import type { RunView } from '$lib/server/runs/run-view';

/** What lists show of a run. */
export type ShownRun = Pick<
	RunView,
	| 'ref'
	| 'purpose'
	| 'version'
	| 'vintage'
	| 'state'
	| 'progress'
	| 'checks'
	| 'reruns'
	| 'requestedBy'
	| 'requestedAt'
	| 'failure'
>;

/** `running, check 12 of 31`, `queued`, `finished`. */
export const stateWords = ({ state, progress, failure }: ShownRun): string => {
	if (state === 'running' && progress && progress.of > 0)
		return `running, check ${Math.min(progress.done + 1, progress.of)} of ${progress.of}`;
	return state === 'failed' && failure !== undefined ? `failed: ${failure}` : state;
};

/** `1 fails, 2 query, 3 not assessable`; a dot where there is no result. */
export const verdictWords = ({ checks }: ShownRun): string => {
	if (!checks) return '·';
	const words = [
		[checks.fails, 'fails'],
		[checks.query, 'query'],
		[checks.notAssessable, 'not assessable']
	] as const;
	const shown = words.filter(([count]) => count > 0).map(([count, word]) => `${count} ${word}`);
	return shown.length ? shown.join(', ') : 'none';
};
