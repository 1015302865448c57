import { leafHash } from '$lib/chain/merkle';
import { consistencyProof, inclusionProof } from '$lib/chain/proof';
import { consistencyText, inclusionText } from '$lib/chain/proof-text';
import { Absent, Conflict } from '$lib/domain/faults';
import type { Handle } from '../db/handle';
import { hashReader } from './hashes';
import type { Checkpoint } from './log';
import { checkpointAt, latestCheckpoint } from './log.queries';
import { textOfEntry } from './read';

/** The newest signed head. @throws Conflict while none has been signed. */
export const newestCheckpoint = (from: Handle): Checkpoint => {
	const found = from.first<Checkpoint>(latestCheckpoint(from.q));
	if (!found) throw new Conflict('No checkpoint has been signed yet.');
	return found;
};

/** What shows that an entry stands in the log, as far as it is signed. */
export interface EntryEvidence {
	/** Canonical text: its UTF-8 bytes are what the leaf hash is over. */
	readonly text: string;
	/** Hexadecimal. */
	readonly leafHash: string;
	readonly checkpoint: Checkpoint;
	/** C2SP tlog-proof v1; absent until a checkpoint covers the entry. */
	readonly proof?: string;
}

/** @throws Absent when there is no such entry. */
export const evidenceOf = (from: Handle, seq: number): EntryEvidence => {
	const text = textOfEntry(from, seq);
	const checkpoint = newestCheckpoint(from);
	return {
		text,
		leafHash: leafHash(Buffer.from(text)).toString('hex'),
		checkpoint,
		...(seq < checkpoint.size && {
			proof: inclusionText(seq, inclusionProof(seq, checkpoint.size, hashReader(from)), checkpoint.note)
		})
	};
};

/** Proof that the newest checkpoint extends the one signed at an older size. @throws Absent when none was signed there. */
export const consistencyFrom = (from: Handle, size: number): string => {
	if (!from.first(checkpointAt(from.q, size))) throw new Absent(`No checkpoint was signed at size ${size}.`);
	const newest = newestCheckpoint(from);
	return consistencyText(
		size,
		newest.size,
		consistencyProof(size, newest.size, hashReader(from)),
		newest.note
	);
};
