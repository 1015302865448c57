import {
	appendLeaf,
	emptyFrontier,
	leafHash,
	nodeHash,
	rootOf,
	storedHashes,
	type Frontier
} from '$lib/chain/merkle';
import type { Findings } from './report';
import type { Source } from './source';

interface Stored {
	readonly level: number;
	readonly hash: Buffer;
}

/**
 * Recomputes the tree leaf by leaf: each leaf row against the entry's bytes, each inner row against the *stored* hashes
 * below it, so that a fault is named where it lies and not at every node above.
 */
export const treeChecker = (source: Source, findings: Findings) => {
	let frontier: Frontier = emptyFrontier;
	const edge: Stored[] = [];
	let broken = false;

	const inner = (hash: Buffer | undefined, pos: number): void => {
		const right = edge.pop()!;
		const left = edge.pop()!;
		const expected = nodeHash(left.hash, right.hash);
		const level = left.level + 1;
		if (!hash) findings.fault('node', `node ${pos}`, 'is missing');
		else if (!hash.equals(expected))
			findings.fault('node', `node ${pos}`, `is not the hash of the two below it (level ${level})`);
		edge.push({ level, hash: hash ?? expected });
	};

	return {
		/** Takes the next entry's bytes. */
		leaf(bytes: Buffer): void {
			const seq = frontier.size;
			const computed = leafHash(bytes);
			const first = storedHashes(seq);
			const end = storedHashes(seq + 1);
			const rows = source.nodes.all(first, end - 1);
			broken ||= rows.length !== end - first;
			const stored = rows[0];
			if (!stored) findings.fault('node', `node ${first}`, `the leaf of E-${seq} is missing`);
			else if (!stored.equals(computed))
				findings.fault(
					'entry',
					`E-${seq}`,
					`root: its bytes do not have the leaf hash stored in node ${first}`
				);
			edge.push({ level: 0, hash: stored ?? computed });
			for (let pos = first + 1; pos < end; pos++) inner(rows[pos - first], pos);
			frontier = appendLeaf(frontier, computed).frontier;
		},
		/** Nodes beyond the tree of the entries seen. */
		end(): void {
			const expected = storedHashes(frontier.size);
			const found = source.nodeCount();
			if (found !== expected && !broken)
				findings.fault(
					'node',
					`node ${Math.min(found, expected)}`,
					`${found} nodes are stored, ${expected} belong to the entries`
				);
		},
		size: (): number => frontier.size,
		/** Root computed from the entries' bytes alone. */
		root: (): Buffer => rootOf(frontier)
	};
};
