import { frontierOf, largestSize, nodeHash, peaks, position, rootOf, type ReadHash } from './merkle';

/** Hash of the subtree over leaves [lo, hi), complete or at the right edge (RFC 9162 §2.1.1). */
const subtreeHash = (lo: number, hi: number, read: ReadHash): Buffer => {
	const width = hi - lo;
	const [top, ...others] = peaks(width);
	if (others.length === 0 && lo % width === 0) return read(position(top!.level, lo / width));
	const split = lo + splitOf(width);
	return nodeHash(subtreeHash(lo, split, read), subtreeHash(split, hi, read));
};

/** The largest power of two below n, for n ≥ 2. */
const splitOf = (n: number): number => 2 ** peaks(n - 1)[0]!.level;

const checkSize = (size: number): void => {
	if (!Number.isSafeInteger(size) || size < 0 || size > largestSize)
		throw new RangeError(`No tree has size ${size}`);
};

/** Root of the first `size` leaves, from stored hashes. */
export const rootAt = (size: number, read: ReadHash): Buffer => {
	checkSize(size);
	return rootOf(frontierOf(size, read));
};

/** Inclusion proof of leaf `index` in the tree of `size` leaves (RFC 9162 §2.1.3.1), from the leaf upwards. */
export const inclusionProof = (index: number, size: number, read: ReadHash): Buffer[] => {
	checkSize(size);
	if (!Number.isSafeInteger(index) || index < 0 || index >= size)
		throw new RangeError(`No leaf ${index} of ${size}`);
	const path = (lo: number, hi: number): Buffer[] => {
		if (hi - lo === 1) return [];
		const split = lo + splitOf(hi - lo);
		return index < split
			? [...path(lo, split), subtreeHash(split, hi, read)]
			: [...path(split, hi), subtreeHash(lo, split, read)];
	};
	return path(0, size);
};

/** Consistency proof between two sizes, 0 < from ≤ to (RFC 9162 §2.1.4.1). */
export const consistencyProof = (from: number, to: number, read: ReadHash): Buffer[] => {
	checkSize(to);
	if (!Number.isSafeInteger(from) || from < 1 || from > to)
		throw new RangeError(`No tree of ${from} within ${to}`);
	const proof = (lo: number, hi: number, whole: boolean): Buffer[] => {
		if (from === hi) return whole ? [] : [subtreeHash(lo, hi, read)];
		const split = lo + splitOf(hi - lo);
		return from <= split
			? [...proof(lo, split, whole), subtreeHash(split, hi, read)]
			: [...proof(split, hi, false), subtreeHash(lo, split, read)];
	};
	return proof(0, to, true);
};
