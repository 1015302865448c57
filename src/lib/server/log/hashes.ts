import type { ReadHash } from '$lib/chain/merkle';
import type { Handle } from '../db/handle';
import { hashAt } from './log.queries';

/** Reads stored hashes of the tree. @throws Error for a row that is not there. */
export const hashReader =
	(from: Handle): ReadHash =>
	(pos) => {
		const row = from.first<{ hash: Buffer }>(hashAt(from.q, pos));
		if (!row) throw new Error(`The tree lacks node ${pos}`);
		return row.hash;
	};
