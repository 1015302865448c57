import { position } from '$lib/chain/merkle';
import { verifyRegister } from '$lib/server/log/verify';
import { projectors } from '$lib/server/projectors';
import Sqlite from 'better-sqlite3';
import { spawn } from 'node:child_process';
import { existsSync, mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join, resolve } from 'node:path';
import { build } from 'vite';
import { beforeAll, expect, test } from 'vitest';

const root = resolve(import.meta.dirname, '../..');
// Inside node_modules, so that the built file finds its packages and nothing is left beside the sources.
const outDir = join(root, 'node_modules/.cache/keelbook-faults');
const child = join(outDir, 'writer.js');

beforeAll(async () => {
	await build({
		root,
		configFile: false,
		logLevel: 'error',
		publicDir: false,
		resolve: { alias: { $lib: join(root, 'src/lib') } },
		// One file: each of the 200 starts costs half.
		ssr: { noExternal: true, external: ['better-sqlite3'] },
		build: { ssr: join(root, 'tests/faults/writer.ts'), outDir, emptyOutDir: true, minify: false }
	});
	return () => rmSync(outDir, { recursive: true, force: true });
});

/** Repeatable chance (a linear congruential generator, Numerical Recipes). */
const chance = (seed: number): (() => number) => {
	let state = seed;
	return () => (state = (Math.imul(state, 1664525) + 1013904223) >>> 0) / 2 ** 32;
};

/** Starts a writer and kills it: so long after it started, or after its first acknowledgement. What it acknowledged. */
const round = (folder: string, wait: number, fromStart: boolean): Promise<Map<number, string>> =>
	new Promise((done, fail) => {
		const writer = spawn(process.execPath, [child, folder, join(folder, 'log-key.pem')], {
			stdio: ['ignore', 'pipe', 'pipe']
		});
		let out = '';
		let errors = '';
		let armed = false;
		const arm = (): void => {
			if (!armed) setTimeout(() => writer.kill('SIGKILL'), wait);
			armed = true;
		};
		if (fromStart) arm();
		writer.stderr.on('data', (text) => (errors += text));
		writer.stdout.on('data', (text) => {
			out += text;
			arm();
		});
		writer.on('close', (_, signal) => {
			if (signal !== 'SIGKILL') return fail(new Error(`The writer ended by itself: ${errors}`));
			// A line cut by the kill was not wholly acknowledged.
			const lines = out
				.slice(0, out.lastIndexOf('\n') + 1)
				.split('\n')
				.filter(Boolean);
			done(new Map(lines.map((line) => [Number(line.split(' ')[0]), line.split(' ')[1]!])));
		});
	});

/** Leaf hashes of the entries that the file holds now. */
const leavesIn = (file: string, seqs: Iterable<number>): Map<number, string | undefined> => {
	const db = new Sqlite(file, { readonly: true });
	const hash = db.prepare<[number], Buffer>('select hash from node where pos = ?').pluck();
	const found = new Map([...seqs].map((seq) => [seq, hash.get(position(0, seq))?.toString('hex')]));
	db.close();
	return found;
};

/** Rounds on one register, each verified whole. Returns the number of acknowledged entries. */
const lane = async (rounds: number, seed: number): Promise<number> => {
	const folder = mkdtempSync(join(tmpdir(), 'keelbook-kill-'));
	const file = join(folder, 'keelbook.db');
	const next = chance(seed);
	const acknowledged = new Map<number, string>();
	try {
		for (let k = 0; k < rounds; k++) {
			// Two in ten are killed while they start: while tables, key and E-0 are made, or while the file recovers.
			const fromStart = k % 5 === 0;
			const wait = fromStart ? 60 + next() * 240 : next() * 40;
			for (const [seq, hash] of await round(folder, wait, fromStart)) acknowledged.set(seq, hash);
			if (!existsSync(file)) continue;
			const last = Math.max(-1, ...acknowledged.keys());
			if (last < 0) continue;
			expect(leavesIn(file, acknowledged.keys())).toEqual(acknowledged);
			const report = await verifyRegister({ file, projectors });
			expect(report.faults, `round ${k}`).toEqual([]);
			expect(report.notChecked).toEqual([]);
			expect(report.entries).toBeGreaterThan(last);
		}
		return acknowledged.size;
	} finally {
		rmSync(folder, { recursive: true, force: true });
	}
};

// About half a minute on two idle cores; a busy machine takes longer, which is no fault.
test('kill-9: 200 rounds while writing lose nothing acknowledged and leave no half state', async () => {
	let acknowledged = 0;
	// Twenty registers of ten rounds, two at a time.
	const seeds = Array.from({ length: 20 }, (_, k) => k + 1);
	const work = async (): Promise<void> => {
		for (let seed = seeds.pop(); seed !== undefined; seed = seeds.pop()) acknowledged += await lane(10, seed);
	};
	await Promise.all([work(), work()]);
	expect(acknowledged).toBeGreaterThan(200);
}, 600_000);
