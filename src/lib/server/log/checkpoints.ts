import type { LogKey } from './keys';
import type { Checkpoint } from './log';
import type { Store } from './store';
import { signCheckpointText } from '$lib/chain/checkpoint';
import { rootOf } from '$lib/chain/merkle';
import { consistencyProof } from '$lib/chain/proof';
import { verifyConsistency } from '$lib/chain/proof-verify';
import type { Verifier } from '$lib/chain/verifier-key';
import { hashReader } from './hashes';
import { latestCheckpoint } from './log.queries';
import { storedFrontier } from './store';

/**
 * Signs the present head and stores it, in a transaction of its own. Before signing, the root is computed afresh from the
 * node rows and must agree with memory, and be consistent with the last signed head.
 * @throws Error when the tree contradicts what was signed: nothing is signed then.
 */
export const signHead = (
	store: Store,
	verifier: Verifier,
	key: LogKey,
	now: () => Date
): Checkpoint | undefined =>
	store.write((tx) => {
		const frontier = storedFrontier(tx);
		const { size } = frontier;
		if (size === 0) return undefined;
		const last = tx.first<Checkpoint>(latestCheckpoint(tx.q));
		const root = rootOf(frontier);
		if (!root.equals(rootOf(store.frontier())))
			throw new Error('The stored tree differs from the one in memory');
		if (last) {
			const proof = consistencyProof(last.size, size, hashReader(tx));
			if (!verifyConsistency({ from: last.size, to: size, rootFrom: last.root, rootTo: root, proof }))
				throw new Error(`The tree does not extend the one signed at size ${last.size}`);
			if (last.size === size) return last;
		}
		const note = signCheckpointText({ origin: verifier.name, size, root }, verifier, key.key);
		const checkpoint = { size, root, note, at: now().toISOString() };
		tx.insert('checkpoint', checkpoint);
		return checkpoint;
	});
