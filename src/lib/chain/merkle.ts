import { sha256 } from './digest';

const leafPrefix = Buffer.of(0);
const nodePrefix = Buffer.of(1);

/** Hash of a leaf (RFC 9162 §2.1.1): SHA-256(0x00 ‖ bytes). */
export const leafHash = (bytes: Uint8Array): Buffer => sha256(leafPrefix, bytes);

/** Hash of an inner node (RFC 9162 §2.1.1): SHA-256(0x01 ‖ left ‖ right). */
export const nodeHash = (left: Uint8Array, right: Uint8Array): Buffer => sha256(nodePrefix, left, right);

/** Root of the tree without leaves. */
export const emptyRoot: Buffer = sha256();

/** Larger trees are refused, so that every size and position is an exact double. */
export const largestSize = 2 ** 40;

/**
 * Row of the hash of a complete subtree in post-order storage: leaves and inner nodes, each after its children.
 * @param level 0 for leaves; the subtree covers leaves [i·2^level, (i+1)·2^level).
 */
export const position = (level: number, index: number): number => {
	let i = index;
	for (let k = 0; k < level; k++) i = 2 * i + 1;
	let sum = level;
	for (; i > 0; i = Math.floor(i / 2)) sum += i;
	return sum;
};

/** Number of stored hashes of a tree with `size` leaves. */
export const storedHashes = (size: number): number => position(0, size);

/** One complete subtree. */
export interface Subtree {
	readonly level: number;
	readonly index: number;
}

/** The complete subtrees that make up a tree of `size` leaves, left to right. */
export const peaks = (size: number): Subtree[] => {
	const found: Subtree[] = [];
	let start = 0;
	for (let level = 40; level >= 0; level--) {
		const width = 2 ** level;
		if (size - start < width) continue;
		found.push({ level, index: start / width });
		start += width;
	}
	return found;
};

/** The right edge of a tree: enough to append and to give its root. */
export interface Frontier {
	readonly size: number;
	readonly edge: readonly { readonly level: number; readonly hash: Buffer }[];
}

export const emptyFrontier: Frontier = Object.freeze({ size: 0, edge: Object.freeze([]) });

/** Reads a stored hash by its row. */
export type ReadHash = (position: number) => Buffer;

/** The frontier of a stored tree. */
export const frontierOf = (size: number, read: ReadHash): Frontier => ({
	size,
	edge: peaks(size).map(({ level, index }) => ({ level, hash: read(position(level, index)) }))
});

/** Appends a leaf: the new frontier, and the hashes to store at the end of the node rows, in order. */
export const appendLeaf = (frontier: Frontier, leaf: Buffer): { frontier: Frontier; stored: Buffer[] } => {
	const edge = [...frontier.edge];
	const stored = [leaf];
	let top = { level: 0, hash: leaf };
	for (let last = edge.at(-1); last?.level === top.level; last = edge.at(-1)) {
		top = { level: top.level + 1, hash: nodeHash(last.hash, top.hash) };
		stored.push(top.hash);
		edge.pop();
	}
	edge.push(top);
	return { frontier: { size: frontier.size + 1, edge }, stored };
};

/** Root of the tree (RFC 9162 §2.1.1): the edge folded from the right. */
export const rootOf = ({ edge }: Frontier): Buffer =>
	edge.length === 0
		? emptyRoot
		: edge.map(({ hash }) => hash).reduceRight((right, left) => nodeHash(left, right));
