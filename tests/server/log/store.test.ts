import { Conflict, Invalid } from '$lib/domain/faults';
import { verifierText } from '$lib/chain/verifier-key';
import { rootOf } from '$lib/chain/merkle';
import type { Projectors } from '$lib/server/context';
import { presentTriggers } from '$lib/server/db/gates';
import { openLog, type LogOptions } from '$lib/server/log/open';
import { verifyRegister } from '$lib/server/log/verify';
import { StartFault } from '$lib/server/start-fault';
import { chmodSync, readFileSync, rmSync, statSync, writeFileSync } from 'node:fs';
import { generateKeyPairSync } from 'node:crypto';
import { join } from 'node:path';
import Sqlite from 'better-sqlite3';
import { afterEach, beforeEach, describe, expect, test, vi } from 'vitest';
import { testRegister, type TestRegister } from '../../support/register';
import { enter, enterIn, registered } from './history';

let register: TestRegister;
let closed = false;
const close = (): void => {
	if (!closed) register.close();
	closed = true;
};
beforeEach(async () => {
	register = await testRegister();
	closed = false;
});
afterEach(close);

const rows = (table: 'model' | 'entry' | 'node'): number =>
	register.ctx.read.all(register.ctx.read.q.selectFrom(table).selectAll()).length;
const started = { version: '0', engine: '1', node: 'v20', sqlite: '3', schema: 6 };

describe('a transaction', () => {
	test('that throws leaves nothing, and the next one goes on from the same place', () => {
		const before = { root: rootOf(register.ctx.log.frontier()), entries: rows('entry'), nodes: rows('node') };
		expect(() =>
			register.ctx.write((tx) => {
				enterIn(register, tx, 'app.started', ['register'], started);
				throw new Error('no');
			})
		).toThrow('no');
		expect({
			root: rootOf(register.ctx.log.frontier()),
			entries: rows('entry'),
			nodes: rows('node')
		}).toEqual(before);
		expect(enter(register, 'app.started', ['register'], started)).toBe(before.entries);
	});

	test('whose projector fails leaves no entry', async () => {
		close();
		const projectors: Projectors = {
			'app.started': () => {
				throw new Error('projection failed');
			}
		};
		register = await testRegister({ projectors });
		closed = false;
		expect(() => enter(register, 'app.started', ['register'], started)).toThrow('projection failed');
		expect(rows('entry')).toBe(register.ctx.log.frontier().size);
	});

	test('is never nested and never waits', () => {
		expect(() => register.ctx.write(() => register.ctx.write(() => 1))).toThrow('never nested');
		expect(() => register.ctx.write(async () => 1)).toThrow('synchronous');
		expect(enter(register, 'app.started', ['register'], started)).toBeGreaterThan(0);
	});

	test('holds several entries, each with its own rows', () => {
		const size = register.ctx.log.frontier().size;
		register.ctx.write((tx) => {
			enterIn(register, tx, 'app.started', ['a'], started);
			enterIn(register, tx, 'app.started', ['b', 'a', 'a'], started);
		});
		const q = register.ctx.read.q
			.selectFrom('entry')
			.select('body')
			.where('seq', '=', size + 1);
		const { subjects } = JSON.parse(register.ctx.read.first<{ body: string }>(q)!.body);
		expect(subjects).toEqual([
			{ n: 2, prev: size, ref: 'a' },
			{ n: 1, prev: null, ref: 'b' }
		]);
	});

	test('appending outside a transaction is refused', () => {
		let escaped: Parameters<Parameters<typeof register.ctx.write>[0]>[0] | undefined;
		register.ctx.write((tx) => void (escaped = tx));
		expect(() => enterIn(register, escaped!, 'app.started', ['a'], started)).toThrow('inside ctx.write only');
	});
});

describe('what may be entered', () => {
	test('a payload that does not fit its schema is refused with the place', () => {
		const wrong = { ...started, node: 20 as unknown as string };
		expect(() => enter(register, 'app.started', ['register'], wrong)).toThrow(Invalid);
		try {
			enter(register, 'app.started', ['register'], wrong);
		} catch (fault) {
			expect((fault as Invalid).issues[0]?.pointer).toBe('/payload/node');
		}
	});

	test('so is one that breaks a rule of entries', () => {
		expect(() => enter(register, 'app.started', ['register'], { ...started, version: 'e\u0301' })).toThrow(
			'NFC'
		);
		expect(() => enter(register, 'app.started', [], started)).toThrow(Invalid);
	});
});

describe('the clock', () => {
	test('that stands a little behind is bent to the last entry, and the entry says so', () => {
		enter(register, 'app.started', ['register'], started);
		const last = register.clock.now().toISOString();
		register.clock.forward(-60_000);
		const raw = register.clock.now().toISOString();
		register.ctx.write((tx) => enterIn(register, tx, 'app.started', ['register'], started));
		const q = register.ctx.read.q.selectFrom('entry').select('body').orderBy('seq', 'desc').limit(1);
		expect(JSON.parse(register.ctx.read.first<{ body: string }>(q)!.body)).toMatchObject({
			at: last,
			clock: { raw, reason: 'behind' }
		});
	});

	test('that stands far behind stops writing', () => {
		enter(register, 'app.started', ['register'], started);
		register.clock.forward(-200_000);
		expect(() =>
			register.ctx.write((tx) => enterIn(register, tx, 'app.started', ['register'], started))
		).toThrow(Conflict);
	});
});

describe('blobs', () => {
	test('are stored once, by digest, with the entry or not at all', () => {
		const { ctx } = register;
		const bytes = Buffer.from('figures');
		const digest = ctx.write((tx) => ctx.blobs.put(tx, bytes));
		expect(ctx.write((tx) => ctx.blobs.put(tx, bytes))).toBe(digest);
		expect(ctx.blobs.get(digest)?.toString()).toBe('figures');
		const lost = `sha256:${'0'.repeat(64)}`;
		expect(ctx.blobs.get(lost)).toBeUndefined();
		let given = '';
		expect(() =>
			ctx.write((tx) => {
				given = ctx.blobs.put(tx, Buffer.from('given up'));
				throw new Error('no');
			})
		).toThrow();
		expect(ctx.blobs.get(given)).toBeUndefined();
	});
});

describe('checkpoints', () => {
	test('are signed once for a size', () => {
		enter(register, 'app.started', ['register'], started);
		const first = register.ctx.log.signCheckpoint();
		expect(register.ctx.log.signCheckpoint()).toEqual(first);
	});

	test('follow at once on what people act by: a policy adopted', () => {
		const policy = { policy: `sha256:${'0'.repeat(64)}`, release: 'test' };
		const seq = enter(register, 'policy.adopted', ['policy'], policy);
		const q = register.ctx.read.q
			.selectFrom('checkpoint')
			.select('size')
			.where('size', '=', seq + 1);
		expect(register.ctx.read.first(q)).toEqual({ size: seq + 1 });
	});

	test('follow within a minute of an entry', () => {
		vi.useFakeTimers();
		try {
			registered(register, 'M-001');
			const latest = () =>
				register.ctx.read.first<{ size: number }>(
					register.ctx.read.q.selectFrom('checkpoint').select('size').orderBy('size', 'desc').limit(1)
				)!.size;
			const { size } = register.ctx.log.frontier();
			expect(latest()).toBeLessThan(size);
			vi.advanceTimersByTime(60_000);
			expect(latest()).toBe(size);
		} finally {
			vi.useRealTimers();
		}
	});
});

test('verify sees one state, though entries are written while it looks', async () => {
	registered(register, 'M-001');
	const { log, projectors } = register.ctx;
	const looking = verifyRegister({
		file: join(register.folder, 'keelbook.db'),
		key: verifierText(log.verifier),
		projectors
	});
	registered(register, 'M-002');
	const { faults, entries } = await looking;
	expect(faults).toEqual([]);
	expect(entries).toBe(log.frontier().size - 1);
});

describe('a damaged file is not served', () => {
	const opening = async (change: string): Promise<unknown> => {
		registered(register, 'M-001');
		register.opened.close();
		closed = true;
		const file = join(register.folder, 'keelbook.db');
		const db = new Sqlite(file);
		db.pragma('foreign_keys = off');
		for (const name of presentTriggers(db).keys()) db.exec(`drop trigger ${name}`);
		db.exec(change);
		db.close();
		const { config, now, projectors } = register.ctx;
		const { origin: address, institution, demo, logKeyFile: keyFile } = config;
		try {
			(await openLog({ file, keyFile, address, institution, demo, projectors, now })).close();
			return 'opened';
		} catch (fault) {
			return fault instanceof StartFault ? [fault.exitCode, fault.message] : fault;
		} finally {
			rmSync(register.folder, { recursive: true });
		}
	};

	test('an untouched one is', async () => expect(await opening('select 1')).toBe('opened'));

	test.each([
		[
			'a byte of an entry',
			`update entry set body = replace(body, 'Retail', 'Retain') where seq = 1`,
			'the bytes of E-1'
		],
		['an entry lost', 'delete from entry where seq = 1', "the log's head says 2 entries"],
		['E-0 lost', 'delete from entry where seq = 0', 'E-0 is missing'],
		['the head moved', 'update log_head set size = 3', "the log's head says 3 entries"],
		['the gate left open', 'insert into current_entry values (1)', 'an entry was left open'],
		[
			'the signed tree changed',
			'update node set hash = zeroblob(32) where pos = 2',
			'the tree is not the one signed'
		],
		[
			'a signature changed',
			`update checkpoint set note = replace(note, substr(note, -20, 8), 'AAAAAAAA')`,
			'checkpoint 2: '
		],
		[
			'signed entries cut off',
			'delete from entry where seq = 1; update log_head set size = 1',
			'2 entries were signed'
		]
	])('%s', async (_, change, words) => {
		expect(await opening(change)).toEqual([65, expect.stringContaining(words)]);
	});
});

describe('the signing key', () => {
	const again = async (change: (keyFile: string) => void): Promise<unknown> => {
		register.opened.close();
		const { config, now, projectors } = register.ctx;
		change(config.logKeyFile);
		const options: LogOptions = {
			file: join(register.folder, 'keelbook.db'),
			keyFile: config.logKeyFile,
			address: config.origin,
			institution: config.institution,
			demo: false,
			projectors,
			now
		};
		closed = true;
		try {
			(await openLog(options)).close();
			return 'opened';
		} catch (fault) {
			return fault instanceof StartFault ? [fault.exitCode, fault.message] : fault;
		} finally {
			rmSync(register.folder, { recursive: true });
		}
	};

	test('is made for its owner alone and opens the register again', async () => {
		expect(statSync(register.ctx.config.logKeyFile).mode & 0o777).toBe(0o600);
		expect(readFileSync(register.ctx.config.logKeyFile, 'utf8')).toContain('PRIVATE KEY');
		expect(await again(() => undefined)).toBe('opened');
	});

	test('that others may read is refused', async () => {
		expect(await again((file) => chmodSync(file, 0o644))).toEqual([
			78,
			expect.stringContaining('0600 or 0400')
		]);
	});

	test('that is another one is refused', async () => {
		const other = generateKeyPairSync('ed25519').privateKey.export({ format: 'pem', type: 'pkcs8' });
		expect(await again((file) => writeFileSync(file, other))).toEqual([
			78,
			expect.stringContaining('not the one that E-0')
		]);
	});

	test('that is of another kind, broken or missing is refused', async () => {
		const other = generateKeyPairSync('x25519').privateKey.export({ format: 'pem', type: 'pkcs8' });
		expect(await again((file) => writeFileSync(file, other))).toEqual([
			78,
			expect.stringContaining('not an Ed25519')
		]);
	});

	test('that is missing is never made anew for a register that has entries', async () => {
		expect(await again((file) => rmSync(file))).toEqual([78, expect.stringContaining('cannot be read')]);
	});
});
