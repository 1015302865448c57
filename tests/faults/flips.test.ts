import { verifierText } from '$lib/chain/verifier-key';
import { NoRegister } from '$lib/server/log/evidence';
import { verifyRegister } from '$lib/server/log/verify';
import { projectors } from '$lib/server/projectors';
import { projectedTables, logTables } from '$lib/server/db/tables';
import Sqlite from 'better-sqlite3';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { history } from '../server/log/history';
import { testRegister } from '../support/register';

const folder = mkdtempSync(join(tmpdir(), 'keelbook-flips-'));
let sound: Buffer;
let key: string;

beforeAll(async () => {
	const register = await testRegister();
	history(register);
	key = verifierText(register.ctx.log.verifier);
	register.opened.close();
	sound = readFileSync(join(register.folder, 'keelbook.db'));
	rmSync(register.folder, { recursive: true });
});
afterAll(() => rmSync(folder, { recursive: true }));

/** Repeatable chance (a linear congruential generator, Numerical Recipes). */
const chance = (seed: number): (() => number) => {
	let state = seed;
	return () => (state = (Math.imul(state, 1664525) + 1013904223) >>> 0) / 2 ** 32;
};

/** Everything the log and its projections say. */
const content = (file: string): string => {
	const db = new Sqlite(file, { readonly: true });
	const all = [...logTables, ...projectedTables].map((table) => db.prepare(`select * from ${table}`).all());
	db.close();
	return JSON.stringify(all);
};

const judged = async (file: string): Promise<'named' | 'sound'> => {
	try {
		const { faults } = await verifyRegister({ file, key, projectors });
		return faults.length > 0 ? 'named' : 'sound';
	} catch (fault) {
		// The header no longer says that it is a database.
		if (fault instanceof NoRegister) return 'named';
		throw fault;
	}
};

test('trap-12: no bit of the file can change what it says unseen', async () => {
	const file = join(folder, 'keelbook.db');
	writeFileSync(file, sound);
	const before = content(file);
	const next = chance(12);
	let named = 0;
	const rounds = 300;
	for (let k = 0; k < rounds; k++) {
		const flipped = Buffer.from(sound);
		const at = Math.floor(next() * flipped.length);
		flipped[at] = flipped[at]! ^ (1 << Math.floor(next() * 8));
		for (const beside of ['-wal', '-shm']) rmSync(`${file}${beside}`, { force: true });
		writeFileSync(file, flipped);
		if ((await judged(file)) === 'named') named++;
		else expect(content(file), `byte ${at}`).toBe(before);
	}
	// Most bytes of so small a file are unused; those that are used must have been hit often enough to mean something.
	expect(named).toBeGreaterThan(rounds / 10);
}, 300_000);
