import { runBattery } from '$lib/battery/run-battery';
import { canonical } from '$lib/chain/canonical';
import { Invalid } from '$lib/domain/faults';
import { checkCounts, groupVerdicts, headlineOf } from './headline';
import type { Computed, ComputeTask, Ported, Progress } from './task';

export { parseUpload as parse } from '$lib/server/lineage/parse';

/** Computes one run in this thread; progress goes through the port, the result back as canonical bytes. */
export const compute = ({ request, policy, data, port }: Ported<ComputeTask>): Computed => {
	const tell = (progress: Progress): void => port.postMessage(progress);
	try {
		tell({ done: 0, of: 0, label: 'reading the data' });
		const result = runBattery(request, policy, data, {
			progress: (done, of, label) => tell({ done, of, label })
		});
		return {
			state: 'computed',
			bytes: new TextEncoder().encode(canonical(result)),
			digest: result.digest,
			checks: checkCounts(result),
			groups: groupVerdicts(result),
			headline: headlineOf(result)
		};
	} catch (fault) {
		// A thread's errors lose their class on the way: what the input is to blame for is said here.
		if (fault instanceof Invalid) return { state: 'refused', sentence: fault.message };
		throw fault;
	} finally {
		port.close();
	}
};
