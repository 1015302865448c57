import { openCheckpoint, signCheckpointText } from '$lib/chain/checkpoint';
import { BadNote, openNote, parseNote, signNote } from '$lib/chain/note';
import { BadVerifierKey, parseVerifier, verifierOf, verifierText } from '$lib/chain/verifier-key';
import { rawPublicKey } from '$lib/chain/ed25519';
import { createPrivateKey, generateKeyPairSync } from 'node:crypto';
import { describe, expect, test } from 'vitest';
import ed25519 from '../vectors/ed25519.json';
import vectors from '../vectors/note.json';

const ours = parseVerifier(vectors.ours.vkey);
/** PKCS#8 form (RFC 8410) of the secret of RFC 8032 §7.1 test 1. */
const key = createPrivateKey({
	key: Buffer.from(`302e020100300506032b657004220420${ed25519.mustPass[0]!.secret}`, 'hex'),
	format: 'der',
	type: 'pkcs8'
});
const { size } = vectors.ours;
const root = Buffer.from(vectors.ours.root, 'hex');

describe('signed notes (C2SP signed-note)', () => {
	test('the published note opens with the published key', () => {
		const note = openNote(vectors.published.note, [parseVerifier(vectors.published.vkey)]);
		expect(note.by.map(({ name }) => name)).toEqual(['PeterNeumann']);
		expect(note.text.endsWith('\n')).toBe(true);
	});

	test.each([vectors.published.vkey, vectors.ours.vkey])('a verifier key reads back: %s', (text) => {
		expect(verifierText(parseVerifier(text))).toBe(text);
	});

	test('a checkpoint is signed to the published bytes', () => {
		const head = { origin: ours.name, size, root };
		expect(signCheckpointText(head, ours, key)).toBe(vectors.ours.note);
		expect(openCheckpoint(vectors.ours.note, ours)).toEqual(head);
	});

	test.each(vectors.mustFail)('refuses: $name', ({ note }) => {
		expect(() => openCheckpoint(note, ours)).toThrow(BadNote);
	});

	test('a key that is not known signs nothing, and stands beside one that is', () => {
		const { privateKey } = generateKeyPairSync('ed25519');
		const other = verifierOf('other.example/log', rawPublicKey(privateKey));
		const foreign = signNote('one\ntwo\n', other, privateKey);
		expect(() => openNote(foreign, [ours])).toThrow('no known key');
		const both = foreign + signNote('one\ntwo\n', ours, key).split('\n\n')[1]!;
		expect(openNote(both, [ours]).by).toEqual([ours]);
		expect(openNote(both, [ours, other]).by).toEqual([other, ours]);
	});

	test('more than 16 signatures and more than 16 KiB are refused', () => {
		const line = vectors.ours.note.split('\n\n')[1]!;
		expect(() => parseNote(`a\n\n${line.repeat(17)}`)).toThrow('too many');
		expect(() => parseNote(`${'a'.repeat(16_384)}\n\n${line}`)).toThrow('too long');
	});

	test('a checkpoint of another origin is refused, though the key is known', () => {
		const note = signNote(`other.example/log\n${size}\n${root.toString('base64')}\n`, ours, key);
		expect(() => openCheckpoint(note, ours)).toThrow('another log');
	});

	test.each([
		'name',
		'name+00000000+ARpc2QcUPDhMQegwxbzhKqiBfsVkmqq/LDE4izWy10TW',
		`${ours.name}+f2d98898+not base64`,
		`${ours.name}+f2d98898+AtdamAGCsQq31Uv+08lkBzoO4XLz2qYjJa8CGmj3B1Ea`,
		'a b+f2d98898+AddamAGCsQq31Uv+08lkBzoO4XLz2qYjJa8CGmj3B1Ea'
	])('is no verifier key: %s', (text) => {
		expect(() => parseVerifier(text)).toThrow(BadVerifierKey);
	});
});
