import { signCheckpointText } from '$lib/chain/checkpoint';
import { rawPublicKey } from '$lib/chain/ed25519';
import { appendLeaf, emptyFrontier, leafHash } from '$lib/chain/merkle';
import { BadNote } from '$lib/chain/note';
import { inclusionProof, rootAt } from '$lib/chain/proof';
import { inclusionText, parseInclusion, provesEntry } from '$lib/chain/proof-text';
import { verifierOf } from '$lib/chain/verifier-key';
import { generateKeyPairSync } from 'node:crypto';
import { expect, test } from 'vitest';

const { privateKey } = generateKeyPairSync('ed25519');
const verifier = verifierOf('bank.example/keelbook/0000000000000000', rawPublicKey(privateKey));
const leaves = Array.from({ length: 11 }, (_, k) => Buffer.from(`{"seq":${k}}`));
const rows: Buffer[] = [];
let frontier = emptyFrontier;
for (const leaf of leaves) {
	const step = appendLeaf(frontier, leafHash(leaf));
	rows.push(...step.stored);
	frontier = step.frontier;
}
const read = (pos: number): Buffer => rows[pos]!;
const note = (size: number): string =>
	signCheckpointText({ origin: verifier.name, size, root: rootAt(size, read) }, verifier, privateKey);
const proofOf = (index: number, size: number): string =>
	inclusionText(index, inclusionProof(index, size, read), note(size));

test('a proof names its entry and no other, under every signed size', () => {
	for (let size = 1; size <= 11; size++)
		for (let index = 0; index < size; index++) {
			const text = proofOf(index, size);
			for (const [k, leaf] of leaves.entries()) expect(provesEntry(text, leaf, verifier)).toBe(k === index);
		}
});

test('it is the published layout', () => {
	const [header, index, first, second, blank, origin] = proofOf(2, 4).split('\n');
	expect([header, index]).toEqual(['c2sp.org/tlog-proof@v1', 'index 2']);
	expect(first).toBe(leafHash(leaves[3]!).toString('base64'));
	expect(second).toHaveLength(44);
	expect([blank, origin]).toEqual(['', verifier.name]);
});

test('data of other applications before the index is passed over', () => {
	const text = proofOf(2, 4).replace('index 2', 'extra YWJj\nindex 2');
	expect(provesEntry(text, leaves[2]!, verifier)).toBe(true);
});

test.each([
	['another header', (text: string) => text.replace('@v1', '@v2')],
	['an index with a leading zero', (text: string) => text.replace('index 2', 'index 02')],
	['no index', (text: string) => text.replace('index 2\n', '')],
	['a hash that is too short', (text: string) => text.replace(/\n[^\n]{44}\n/, '\nAAAA\n')],
	['no blank line', (text: string) => text.replaceAll('\n\n', '\n')],
	['a signature that fails', (text: string) => text.replace(/\n4\n/, '\n5\n')],
	['a foreign key', (text: string) => text.replaceAll(verifier.name, 'other.example/keelbook/0')]
])('refused: %s', (_, change) => {
	expect(() => provesEntry(change(proofOf(2, 4)), leaves[2]!, verifier)).toThrow(BadNote);
});

test.each([
	['another index', (text: string) => text.replace('index 2', 'index 3')],
	['hashes swapped', (text: string) => text.replace(/\n([^\n]{44})\n([^\n]{44})\n\n/, '\n$2\n$1\n\n')],
	['a hash left out', (text: string) => text.replace(/\n[^\n]{44}\n/, '\n')]
])('fails: %s', (_, change) => {
	const changed = change(proofOf(2, 4));
	expect(changed).not.toBe(proofOf(2, 4));
	expect(provesEntry(changed, leaves[2]!, verifier)).toBe(false);
});

test('more hashes than a tree can need are refused', () => {
	const [hash] = inclusionProof(0, 2, read);
	expect(() => parseInclusion(inclusionText(0, Array(64).fill(hash), note(2)))).toThrow(BadNote);
});
