import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, afterEach, describe, expect, test, vi } from 'vitest';
import type { RunResult } from '$lib/domain/run-result';
import run from '../../src/cli/run';

const example = join(import.meta.dirname, '../fixtures/example');
const spec = join(example, 'us-consumption.json');
const data = join(example, 'us-consumption.csv');
const folder = mkdtempSync(join(tmpdir(), 'keelbook-run-'));

afterAll(() => rmSync(folder, { recursive: true, force: true }));
afterEach(() => vi.restoreAllMocks());

const call = async (...args: string[]): Promise<{ code: number; out: string; err: string }> => {
	let [out, err] = ['', ''];
	vi.spyOn(process.stdout, 'write').mockImplementation((text) => ((out += String(text)), true));
	vi.spyOn(process.stderr, 'write').mockImplementation((text) => ((err += String(text)), true));
	const code = await run(args);
	vi.restoreAllMocks();
	return { code, out, err };
};

const written = (name: string, text: string): string => {
	const file = join(folder, name);
	writeFileSync(file, text);
	return file;
};

describe('keelbook run', () => {
	test('prints a table and writes the result', async () => {
		const out = join(folder, 'r.json');
		const called = await call('--spec', spec, '--data', data, '--out', out);
		expect(called.code).toBe(0);
		expect(called.err).toBe('');
		// Reference: statsmodels and R on the same data, tests/reference/cases/macrodata.json, ecm1.
		expect(called.out).toContain('11.8 % of a gap closes in a quarter');
		expect(called.out).toMatch(/change of income\(t\)\s+0\.32564/);
		const result = JSON.parse(readFileSync(out, 'utf8')) as RunResult;
		expect(result.digest).toMatch(/^sha256:[0-9a-f]{64}$/);
		expect(called.out).toContain(result.digest);
		expect(result.replication.every(({ replicates }) => replicates)).toBe(true);
	});

	test('the same call gives the same digest', async () => {
		const digests = [
			await call('--spec', spec, '--data', data),
			await call('--spec', spec, '--data', data)
		].map(({ out }) => /Result (sha256:\S+)/.exec(out)?.[1]);
		expect(digests[0]).toBeDefined();
		expect(digests[0]).toBe(digests[1]);
	});

	test.each([
		['no arguments', [], 64, '--spec and --data are needed'],
		['an unknown option', ['--frobnicate'], 64, 'Unknown option'],
		['a file that is not there', ['--spec', '/nowhere.json', '--data', data], 66, '/nowhere.json'],
		[
			'an output that cannot be made',
			['--spec', spec, '--data', data, '--out', '/nowhere/r.json'],
			73,
			'/nowhere/r.json'
		],
		['a tier that is none', ['--spec', spec, '--data', data, '--tier', '9'], 65, 'no tier 9']
	])('%s', async (_, args, code, words) => {
		const called = await call(...args);
		expect(called.code).toBe(code);
		expect(called.err).toContain(words);
	});

	test('a specification with a fault names the field', async () => {
		const wrong = JSON.parse(readFileSync(spec, 'utf8')) as { longRun: { drivers: { series: string }[] } };
		wrong.longRun.drivers[0]!.series = 'wages';
		const called = await call('--spec', written('s.json', JSON.stringify(wrong)), '--data', data);
		expect(called).toMatchObject({ code: 65, out: '' });
		expect(called.err).toContain('/longRun/drivers/0/series: There is no series named wages');
	});

	test('a data file with a fault names row and column', async () => {
		const text = readFileSync(data, 'utf8').replace('1733.7', 'n.a?');
		const called = await call('--spec', spec, '--data', written('d.csv', text));
		expect(called).toMatchObject({ code: 65, out: '' });
		expect(called.err).toMatch(/row 3, column realcons/i);
	});

	test('a policy that is not a released one is said to be so', async () => {
		const release = readFileSync(join(import.meta.dirname, '../../policies/2026-12-01.yaml'), 'utf8');
		const own = written('p.yaml', release.replace('fails: { value: 0.01', 'fails: { value: 0.02'));
		const called = await call('--spec', spec, '--data', data, '--policy', own);
		expect(called.code).toBe(0);
		expect(called.out).toContain('(not a released file)');
	});
});
