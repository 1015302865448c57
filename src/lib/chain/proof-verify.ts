import { largestSize, nodeHash, peaks } from './merkle';

export interface Inclusion {
	readonly index: number;
	readonly size: number;
	/** Computed from the entry's bytes by the caller: a hash handed in proves nothing. */
	readonly leafHash: Uint8Array;
	/** Taken together with `size` from one verified checkpoint: a proof alone does not bind the size. */
	readonly root: Uint8Array;
	readonly proof: readonly Uint8Array[];
}

export interface Consistency {
	readonly from: number;
	readonly to: number;
	readonly rootFrom: Uint8Array;
	readonly rootTo: Uint8Array;
	readonly proof: readonly Uint8Array[];
}

const isSize = (n: number): boolean => Number.isSafeInteger(n) && n >= 0 && n <= largestSize;
const isHash = (bytes: Uint8Array): boolean => bytes.length === 32;
const same = (a: Uint8Array, b: Uint8Array): boolean => isHash(a) && isHash(b) && Buffer.compare(a, b) === 0;
const odd = (n: number): boolean => n % 2 === 1;
const half = (n: number): number => Math.floor(n / 2);

/** Verifies an inclusion proof: the loop of RFC 9162 §2.1.3.2, which checks its length too. */
export const verifyInclusion = ({ index, size, leafHash, root, proof }: Inclusion): boolean => {
	if (!isSize(index) || !isSize(size) || index >= size || !isHash(leafHash) || !proof.every(isHash))
		return false;
	let fn = index;
	let sn = size - 1;
	let hash = leafHash;
	for (const sibling of proof) {
		if (sn === 0) return false;
		if (odd(fn) || fn === sn) {
			hash = nodeHash(sibling, hash);
			while (!odd(fn) && fn !== 0) {
				fn = half(fn);
				sn = half(sn);
			}
		} else {
			hash = nodeHash(hash, sibling);
		}
		fn = half(fn);
		sn = half(sn);
	}
	return sn === 0 && same(hash, root);
};

/** Verifies a consistency proof: the loop of RFC 9162 §2.1.4.2; equal sizes need equal roots and no proof. */
export const verifyConsistency = ({ from, to, rootFrom, rootTo, proof }: Consistency): boolean => {
	if (!isSize(from) || !isSize(to) || from < 1 || from > to || !proof.every(isHash)) return false;
	if (from === to) return proof.length === 0 && same(rootFrom, rootTo);
	if (proof.length === 0) return false;
	const complete = peaks(from).length === 1;
	const [first, ...rest] = complete ? [rootFrom, ...proof] : proof;
	let fn = from - 1;
	let sn = to - 1;
	while (odd(fn)) {
		fn = half(fn);
		sn = half(sn);
	}
	let older = first!;
	let newer = first!;
	for (const hash of rest) {
		if (sn === 0) return false;
		if (odd(fn) || fn === sn) {
			older = nodeHash(hash, older);
			newer = nodeHash(hash, newer);
			while (!odd(fn) && fn !== 0) {
				fn = half(fn);
				sn = half(sn);
			}
		} else {
			newer = nodeHash(newer, hash);
		}
		fn = half(fn);
		sn = half(sn);
	}
	return sn === 0 && same(older, rootFrom) && same(newer, rootTo);
};
