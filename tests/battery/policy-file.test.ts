import { describe, expect, test } from 'vitest';
import { parseLock, parsePolicy, releasedPolicy, textDigest } from '$lib/battery/policy-file';
import { familyId, registry } from '$lib/battery/registry';
import { settingsOf } from '$lib/battery/settings';
import { sources } from '$lib/battery/sources';
import { checkTitles, groupTitles } from '$lib/battery/words';
import { noSource, policyLine, policyLines, proposedTier } from '$lib/domain/policy';
import { readdirSync, readFileSync } from 'node:fs';
import { policy } from './cases';

const folder = new URL('../../policies/', import.meta.url);
const lock = parseLock(readFileSync(new URL('LOCK', folder), 'utf8'));
const files = readdirSync(folder).filter((name) => name.endsWith('.yaml'));

describe('released policies', () => {
	test('every file stands in LOCK with its own digest, and LOCK names no other', () => {
		expect([...lock.keys()].sort()).toEqual([...files].sort());
		for (const name of files) {
			const text = readFileSync(new URL(name, folder), 'utf8');
			expect(releasedPolicy(name, text, lock).digest).toBe(textDigest(text));
		}
	});

	test('a file changed by one byte is refused, and so is one that LOCK does not name', () => {
		const name = files[0]!;
		const text = readFileSync(new URL(name, folder), 'utf8');
		expect(() => releasedPolicy(name, text.replace('0.05', '0.06'), lock)).toThrow(
			'changed after its release'
		);
		expect(() => releasedPolicy('own.yaml', text, lock)).toThrow('does not stand in LOCK');
		expect(() => parseLock('2026.yaml md5:1')).toThrow('line 1');
	});

	test('every check of a battery is known, has lines, a title and a source', () => {
		for (const { battery } of policy.tiers)
			for (const id of battery) {
				expect(id === familyId || registry.has(id), id).toBe(true);
				expect(policy.checks[id], id).toBeDefined();
				expect(checkTitles[id], id).toBeDefined();
				expect(sources[id], id).toBeDefined();
			}
		for (const { group, primary } of policy.groups) {
			expect(groupTitles[group]).toBeDefined();
			for (const id of Object.values(primary ?? {})) expect(registry.has(id), id).toBe(true);
		}
	});

	test('every line has a value, a reason and a source', () => {
		const lines = policyLines(policy);
		expect(lines.length).toBeGreaterThan(60);
		for (const { path, line } of lines) {
			expect(line.reason.length, path).toBeGreaterThan(5);
			expect(line.source === noSource || /\d{4}|[a-z]/.test(line.source), path).toBe(true);
			expect(policyLine(policy, path)).toBe(line);
		}
	});

	test.each([
		['twice', 'schema: 1\nschema: 1\n', 'Map keys must be unique'],
		['not YAML', 'a: [', 'Flow sequence']
	])('a text with a fault is refused: %s', (_, text, words) => {
		expect(() => parsePolicy(text, 'p.yaml')).toThrow(words);
	});
});

test('an unknown key of a policy is named', () => {
	const text = `${readFileSync(new URL(files[0]!, folder), 'utf8')}\nextra: true\n`;
	expect(() => parsePolicy(text, 'p.yaml')).toThrow('extra');
});

describe('tier proposed from two scores', () => {
	test.each([
		[1, 1, 3],
		[3, 1, 3],
		[2, 2, 2],
		[3, 2, 2],
		[4, 2, 1],
		[3, 3, 1],
		[4, 4, 1]
	])('materiality %d, complexity %d: tier %d', (materiality, complexity, tier) =>
		expect(proposedTier(policy, materiality, complexity).tier).toBe(tier)
	);
});

describe('settings of a run', () => {
	test('an override replaces its line', () => {
		const settings = settingsOf(policy, [{ setting: 'levels/query', value: 0.1, reason: 'r' }]);
		expect(settings.number('levels/query')).toBe(0.1);
		expect(settings.number('levels/fails')).toBe(0.01);
	});

	test.each([
		['a line that may not be changed', { setting: 'stability', value: 1, reason: 'r' }, 'has no line'],
		['a fixed line', { setting: 'checks/stability.sup-f/trim', value: 0.1, reason: 'r' }, 'does not let'],
		['another kind', { setting: 'levels/query', value: 'low', reason: 'r' }, 'needs a number']
	])('%s is refused', (_, override, words) => expect(() => settingsOf(policy, [override])).toThrow(words));
});
