import { openCheckpoint } from '$lib/chain/checkpoint';
import { leafHash, position } from '$lib/chain/merkle';
import { BadNote } from '$lib/chain/note';
import { rootAt } from '$lib/chain/proof';
import type { Verifier } from '$lib/chain/verifier-key';
import type { Handle } from '../db/handle';
import { StartFault } from '../start-fault';
import { hashReader } from './hashes';
import type { Checkpoint } from './log';
import { logHead } from './head';
import { bodiesFrom, latestCheckpoint, newestFolio, openGates } from './log.queries';

/** Entries at the end of the log whose bytes are hashed at each start; `verify` looks at all of them. */
const recent = 10_000;

const damaged = (words: string): StartFault =>
	new StartFault(65, `The register is damaged: ${words}. Run keelbook verify and restore a backup.`);

const checkHead = (from: Handle): number => {
	const { size } = logHead(from);
	const newest = from.first<{ seq: number }>(newestFolio(from.q))?.seq ?? -1;
	if (size !== newest + 1) throw damaged(`the log's head says ${size} entries, the last one is E-${newest}`);
	if (from.first(openGates(from.q))) throw damaged('an entry was left open');
	return size;
};

const checkSigned = (from: Handle, verifier: Verifier, size: number): void => {
	const last = from.first<Checkpoint>(latestCheckpoint(from.q));
	if (!last) return;
	if (last.size > size) throw damaged(`${last.size} entries were signed, ${size} are here`);
	try {
		const head = openCheckpoint(last.note, verifier);
		if (head.size !== last.size || !head.root.equals(rootAt(last.size, hashReader(from))))
			throw damaged(`the tree is not the one signed over ${last.size} entries`);
	} catch (cause) {
		if (!(cause instanceof BadNote)) throw cause;
		throw damaged(`checkpoint ${last.size}: ${cause.message}`);
	}
};

const checkLeaves = (from: Handle, size: number): void => {
	const read = hashReader(from);
	for (let next = Math.max(0, size - recent); next < size;) {
		const rows = from.all<{ seq: number; body: string }>(bodiesFrom(from.q, next, 1000));
		for (const { seq, body } of rows) {
			if (seq !== next) throw damaged(`E-${next} is missing`);
			if (!leafHash(Buffer.from(body)).equals(read(position(0, seq))))
				throw damaged(`the bytes of E-${seq} are not those written`);
			next++;
		}
		if (rows.length === 0) throw damaged(`E-${next} is missing`);
	}
};

/**
 * What is looked at before a register is served: its head, its gate, its last signature, its newest entries.
 * @throws StartFault 65 naming the first bad place.
 */
export const checkAtStart = (from: Handle, verifier: Verifier): void => {
	const size = checkHead(from);
	checkSigned(from, verifier, size);
	checkLeaves(from, size);
};
