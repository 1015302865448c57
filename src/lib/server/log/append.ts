import { appendLeaf, leafHash, storedHashes, type Frontier } from '$lib/chain/merkle';
import type { Entry } from '$lib/domain/entry';
import type { Projector, Projectors } from '../context';
import type { Tx } from '../db/handle';

/**
 * Stores the canonical text of an entry, projects it and closes the gate: one path for recording and for replay.
 * @param entry what the text says, read back from it, so that both see the same values.
 */
export const appendText = (
	tx: Tx,
	frontier: Frontier,
	text: string,
	entry: Entry,
	projectors: Projectors
): Frontier => {
	tx.insert('entry', { seq: entry.seq, at: entry.at, type: entry.type, actor: entry.actor, body: text });
	for (const { ref, n } of entry.subjects) tx.insert('entry_subject', { ref, n, seq: entry.seq });
	const { frontier: moved, stored } = appendLeaf(frontier, leafHash(Buffer.from(text)));
	const first = storedHashes(entry.seq);
	for (const [k, hash] of stored.entries()) tx.insert('node', { pos: first + k, hash });
	const project = projectors[entry.type] as Projector<typeof entry.type> | undefined;
	project?.(tx, entry as never);
	if (tx.remove('current_entry', { seq: entry.seq }) !== 1)
		throw new Error(`The gate of E-${entry.seq} did not close once`);
	return moved;
};
