import {
	appendLeaf,
	emptyFrontier,
	emptyRoot,
	frontierOf,
	leafHash,
	nodeHash,
	position,
	rootOf,
	storedHashes,
	type Frontier
} from '$lib/chain/merkle';
import { consistencyProof, inclusionProof, rootAt } from '$lib/chain/proof';
import { verifyConsistency, verifyInclusion } from '$lib/chain/proof-verify';
import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import vectors from '../vectors/merkle.json';

const bytes = (hex: string): Buffer => Buffer.from(hex, 'hex');

/** A stored tree over leaves 0, 1, 2, …, as rows in order. */
const grown = (leaves: readonly Buffer[]): { rows: Buffer[]; frontier: Frontier } => {
	const rows: Buffer[] = [];
	let frontier = emptyFrontier;
	for (const leaf of leaves) {
		const step = appendLeaf(frontier, leafHash(leaf));
		rows.push(...step.stored);
		frontier = step.frontier;
	}
	return { rows, frontier };
};

/** MTH by its recursive definition (RFC 9162 §2.1.1), written apart from the code under test. */
const definition = (leaves: readonly Buffer[]): Buffer => {
	if (leaves.length === 0) return emptyRoot;
	if (leaves.length === 1) return leafHash(leaves[0]!);
	let split = 1;
	while (split * 2 < leaves.length) split *= 2;
	return nodeHash(definition(leaves.slice(0, split)), definition(leaves.slice(split)));
};

const numbered = (size: number): Buffer[] => Array.from({ length: size }, (_, k) => Buffer.from(`leaf ${k}`));

describe('roots', () => {
	const leaves = vectors.leaves.map(bytes);
	const { rows, frontier } = grown(leaves);
	const read = (pos: number): Buffer => rows[pos]!;

	test.each(vectors.rootsBySize.map((root, size) => ({ root, size })))(
		'of $size leaves',
		({ root, size }) => {
			expect(rootAt(size, read).toString('hex')).toBe(root);
			expect(rootOf(grown(leaves.slice(0, size)).frontier).toString('hex')).toBe(root);
		}
	);

	test('the frontier is rebuilt from the rows', () => {
		expect(frontierOf(leaves.length, read)).toEqual(frontier);
	});

	test('equal the recursive definition for every size to 70', () => {
		const many = numbered(70);
		const tree = grown(many);
		for (let size = 0; size <= 70; size++)
			expect(rootAt(size, (pos) => tree.rows[pos]!).equals(definition(many.slice(0, size)))).toBe(true);
	});
});

describe('storage in post-order', () => {
	test('leaves and subtrees lie where the order of writing puts them', () => {
		const { rows } = grown(numbered(64));
		expect(rows).toHaveLength(storedHashes(64));
		const leaf = (k: number): Buffer => leafHash(Buffer.from(`leaf ${k}`));
		for (let k = 0; k < 64; k++) expect(rows[position(0, k)]!.equals(leaf(k))).toBe(true);
		expect(rows[position(1, 5)]!.equals(nodeHash(leaf(10), leaf(11)))).toBe(true);
		expect(rows[position(3, 7)]!.equals(definition(numbered(64).slice(56)))).toBe(true);
	});
});

describe('inclusion', () => {
	const hexed = ({ index, size, leafHash: leaf, root, proof }: (typeof vectors.inclusion)[number]) => ({
		index,
		size,
		leafHash: bytes(leaf),
		root: bytes(root),
		proof: proof.map(bytes)
	});

	test.each(vectors.inclusion)('leaf $index of $size', (vector) => {
		const { rows } = grown(vectors.leaves.map(bytes));
		expect(verifyInclusion(hexed(vector))).toBe(true);
		expect(
			inclusionProof(vector.index, vector.size, (pos) => rows[pos]!).map((hash) => hash.toString('hex'))
		).toEqual(vector.proof);
	});

	test.each(vectors.inclusionMustFail)('refuses: $name', (vector) => {
		expect(verifyInclusion(hexed(vector))).toBe(false);
	});

	test('every leaf of every size to 40 proves itself and nothing else', () => {
		const { rows } = grown(numbered(40));
		const read = (pos: number): Buffer => rows[pos]!;
		for (let size = 1; size <= 40; size++) {
			const root = rootAt(size, read);
			for (let index = 0; index < size; index++) {
				const proof = inclusionProof(index, size, read);
				const claim = { index, size, leafHash: leafHash(Buffer.from(`leaf ${index}`)), root, proof };
				expect(verifyInclusion(claim)).toBe(true);
				expect(verifyInclusion({ ...claim, leafHash: leafHash(Buffer.from('another')) })).toBe(false);
				expect(verifyInclusion({ ...claim, proof: [...proof, root] })).toBe(false);
				if (proof.length > 0) expect(verifyInclusion({ ...claim, proof: proof.slice(1) })).toBe(false);
			}
		}
	});
});

describe('trap-06: a proof binds neither the size nor that a hash is a leaf', () => {
	const [forged, inner] = vectors.passTheArithmeticAlone.inclusion;

	test('the arithmetic alone passes for a smaller size, so size and root must come from one checkpoint', () => {
		const { index, size, leafHash: leaf, root, proof } = forged!;
		const claim = { index, leafHash: bytes(leaf), root: bytes(root), proof: proof.map(bytes) };
		expect(verifyInclusion({ ...claim, size })).toBe(true);
		// With the root that belongs to that size it fails.
		expect(verifyInclusion({ ...claim, size, root: bytes(vectors.rootsBySize[size]!) })).toBe(false);
	});

	test('an inner node passes as a leaf when its hash is handed in, and not when the leaf hash is computed', () => {
		const { index, size, leafHash: leaf, root, proof } = inner!;
		const claim = { index, size, root: bytes(root), proof: proof.map(bytes) };
		expect(verifyInclusion({ ...claim, leafHash: bytes(leaf) })).toBe(true);
		expect(verifyInclusion({ ...claim, leafHash: leafHash(bytes(leaf)) })).toBe(false);
	});

	test('consistency to a forged size passes only with the wrong root for that size', () => {
		const { from, to, rootFrom, rootTo, proof } = vectors.passTheArithmeticAlone.consistency[0]!;
		const claim = { from, to, rootFrom: bytes(rootFrom), proof: proof.map(bytes) };
		expect(verifyConsistency({ ...claim, rootTo: bytes(rootTo) })).toBe(true);
		expect(verifyConsistency({ ...claim, rootTo: bytes(vectors.rootsBySize[to]!) })).toBe(false);
	});
});

describe('consistency', () => {
	const hexed = ({ from, to, rootFrom, rootTo, proof }: (typeof vectors.consistency)[number]) => ({
		from,
		to,
		rootFrom: bytes(rootFrom),
		rootTo: bytes(rootTo),
		proof: proof.map(bytes)
	});

	test.each(vectors.consistency)('$from to $to', (vector) => {
		const { rows } = grown(vectors.leaves.map(bytes));
		expect(verifyConsistency(hexed(vector))).toBe(true);
		expect(
			consistencyProof(vector.from, vector.to, (pos) => rows[pos]!).map((hash) => hash.toString('hex'))
		).toEqual(vector.proof);
	});

	test.each(vectors.consistencyMustFail)('refuses: $name', (vector) => {
		expect(verifyConsistency(hexed(vector))).toBe(false);
	});

	test('any two sizes of one tree, and no tree whose past was changed', () => {
		const size = 60;
		const honest = grown(numbered(size)).rows;
		fc.assert(
			fc.property(
				fc.integer({ min: 1, max: size }),
				fc.integer({ min: 1, max: size }),
				fc.nat(size - 1),
				(a, b, changed) => {
					const [from, to] = [Math.min(a, b), Math.max(a, b)];
					const read = (pos: number): Buffer => honest[pos]!;
					const claim = { from, to, rootFrom: rootAt(from, read), rootTo: rootAt(to, read) };
					expect(verifyConsistency({ ...claim, proof: consistencyProof(from, to, read) })).toBe(true);
					if (changed >= from) return;
					const other = grown(
						numbered(size).map((leaf, k) => (k === changed ? Buffer.from('forged') : leaf))
					).rows;
					const forged = (pos: number): Buffer => other[pos]!;
					const proof = consistencyProof(from, to, forged);
					expect(verifyConsistency({ ...claim, rootTo: rootAt(to, forged), proof })).toBe(false);
				}
			)
		);
	});

	test('sizes that no tree has are refused', () => {
		const read = (): Buffer => emptyRoot;
		expect(() => inclusionProof(0, 2 ** 41, read)).toThrow(RangeError);
		expect(() => inclusionProof(3, 3, read)).toThrow(RangeError);
		expect(() => consistencyProof(0, 3, read)).toThrow(RangeError);
		expect(() => consistencyProof(4, 3, read)).toThrow(RangeError);
		expect(() => rootAt(1.5, read)).toThrow(RangeError);
	});
});
