import { digestOf } from '$lib/chain/digest';
import { parseUpload } from '$lib/server/lineage/parse';
import type { Pool } from '$lib/server/runs/pool';
import type { Computed, ComputeTask, Progress } from '$lib/server/runs/task';

/** A computation that waits for the test to end it. */
export interface Held {
	readonly task: ComputeTask;
	readonly progress: (progress: Progress) => void;
	readonly finish: (result: unknown) => void;
	readonly answer: (computed: Computed) => void;
	readonly fail: (error: Error) => void;
}

/** A pool without threads: files are parsed at once, computations wait in `held` until the test ends them. */
export interface ManualPool extends Pool {
	readonly held: readonly Held[];
}

/** What a thread answers for some result. */
export const computedOf = (result: unknown): Computed => {
	const bytes = new TextEncoder().encode(JSON.stringify(result));
	return {
		state: 'computed',
		bytes,
		digest: digestOf(bytes),
		checks: { holds: 20, query: 2, fails: 1, notAssessable: 3 },
		groups: [{ group: 'cointegration', verdict: 'holds' }],
		headline: { n: 80, speed: 0.327, gap: 1.6, gapPeriod: '2019-Q4', gapBefore: [0.2, 0.9] }
	};
};

export const manualPool = (): ManualPool => {
	const held: Held[] = [];
	let closed = false;
	const rejections: ((error: Error) => void)[] = [];
	return {
		held,
		parse: (input) => parseUpload(input),
		compute: (task, { signal, progress } = {}) =>
			new Promise<Computed>((resolve, reject) => {
				rejections.push(reject);
				signal?.addEventListener('abort', () => reject(new Error('The task has been aborted')));
				held.push({
					task,
					progress: (told) => progress?.(told),
					finish: (result) => resolve(computedOf(result)),
					answer: resolve,
					fail: reject
				});
			}),
		closed: () => closed,
		close: async () => {
			closed = true;
			for (const reject of rejections) reject(new Error('Terminating worker thread'));
			await Promise.resolve();
		}
	};
};
