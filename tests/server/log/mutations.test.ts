import { signCheckpointText } from '$lib/chain/checkpoint';
import { rawPublicKey } from '$lib/chain/ed25519';
import { leafHash, nodeHash, position } from '$lib/chain/merkle';
import { verifierOf, verifierText } from '$lib/chain/verifier-key';
import { expectedTriggers } from '$lib/server/db/gates';
import { verifyRegister } from '$lib/server/log/verify';
import type { Part, Report } from '$lib/server/log/verify/report';
import { projectors } from '$lib/server/projectors';
import Sqlite from 'better-sqlite3';
import { generateKeyPairSync } from 'node:crypto';
import { copyFileSync, mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { testRegister } from '../../support/register';
import { history } from './history';

/**
 * One change each to the file of a sound register, made by somebody who holds the file and knows the format: triggers are
 * dropped first and put back afterwards. `verify` must fail and name the place.
 */
const folder = mkdtempSync(join(tmpdir(), 'keelbook-'));
const sound = join(folder, 'sound.db');
let key: string;

beforeAll(async () => {
	const register = await testRegister();
	history(register);
	key = verifierText(register.ctx.log.verifier);
	register.opened.close();
	copyFileSync(join(register.folder, 'keelbook.db'), sound);
	rmSync(register.folder, { recursive: true });
});
afterAll(() => rmSync(folder, { recursive: true }));

const verify = (file: string, given = key): Promise<Report> =>
	verifyRegister({ file, key: given, projectors });

let copies = 0;

/** Changes a copy of the register and verifies it. */
const after = async (change: (db: Sqlite.Database) => void, keepTriggers = false): Promise<Report> => {
	const file = join(folder, `changed-${++copies}.db`);
	copyFileSync(sound, file);
	const db = new Sqlite(file);
	db.pragma('foreign_keys = off');
	db.pragma('ignore_check_constraints = on');
	const triggers = [...expectedTriggers(db)];
	if (!keepTriggers) for (const [name] of triggers) db.exec(`drop trigger ${name}`);
	change(db);
	if (!keepTriggers) for (const [, sql] of triggers) db.exec(sql);
	db.pragma('wal_checkpoint(truncate)');
	db.close();
	return verify(file);
};

const named = ({ faults }: Report): string[] => faults.map(({ part, where }) => `${part} ${where}`);
const words = ({ faults }: Report, part: Part): string =>
	faults.find((fault) => fault.part === part)?.words ?? '';
const bodyAt = (db: Sqlite.Database, seq: number): string =>
	db.prepare<[number], string>('select body from entry where seq = ?').pluck().get(seq)!;
const setBody = (db: Sqlite.Database, seq: number, body: string | Buffer): void =>
	void db.prepare('update entry set body = cast(? as text) where seq = ?').run(body, seq);
const edited = (seq: number, from: string | RegExp, to: string) => (db: Sqlite.Database) => {
	const body = bodyAt(db, seq);
	const changed = body.replace(from, to);
	expect(changed).not.toBe(body);
	setBody(db, seq, changed);
};

/** Rebuilds every node over the entries as they now stand: what a forger with time would do. */
const rebuildTree = (db: Sqlite.Database): void => {
	db.exec('delete from node');
	const bodies = db.prepare<[], Buffer>('select cast(body as blob) from entry order by seq').pluck().all();
	const hash = (level: number, index: number): Buffer =>
		level === 0
			? leafHash(bodies[index]!)
			: nodeHash(hash(level - 1, 2 * index), hash(level - 1, 2 * index + 1));
	const rows: [number, Buffer][] = [];
	for (let level = 0; 2 ** level <= bodies.length; level++)
		for (let index = 0; (index + 1) * 2 ** level <= bodies.length; index++)
			rows.push([position(level, index), hash(level, index)]);
	const insert = db.prepare('insert into node values (?, ?)');
	for (const row of rows.sort(([a], [b]) => a - b)) insert.run(...row);
};

test('the register as it was written is sound', async () => {
	const report = await verify(sound);
	expect(report.faults).toEqual([]);
	expect(report).toMatchObject({ entries: 8, checkpoints: 4, blobs: 1, unvouched: false, notChecked: [] });
	expect(report.rows).toBeGreaterThan(8);
});

test('a register whose triggers were dropped and put back is the same register', async () => {
	expect((await after(() => undefined)).faults).toEqual([]);
});

describe('an entry', () => {
	test('one bit of each of its bytes', async () => {
		for (const at of [3, 40, 90, 200]) {
			const report = await after((db) => {
				const body = Buffer.from(bodyAt(db, 3));
				body[at] = body[at]! ^ 1;
				setBody(db, 3, body);
			});
			expect(named(report)[0], `byte ${at}`).toBe('entry E-3');
		}
	});

	test('a digit of a number', async () => {
		const report = await after(edited(4, '"high":1.25', '"high":1.35'));
		expect(named(report)).toEqual(['entry E-4', 'checkpoint checkpoint 5', 'table prior M-001 1 income']);
		expect(words(report, 'entry')).toContain('leaf hash stored in node');
	});

	test('its actor', async () => {
		const report = await after(edited(2, '"actor":"system"', '"actor":"cli"'));
		expect(named(report)[0]).toBe('entry E-2');
		expect(words(report, 'entry')).toBe('the column actor says system, the bytes say cli');
	});

	test('a column beside its bytes', async () => {
		const report = await after((db) => db.exec(`update entry set type = 'model.edited' where seq = 2`));
		expect(named(report)).toEqual(['entry E-2']);
		expect(words(report, 'entry')).toContain('the column type says model.edited');
	});

	test('its time by a millisecond', async () => {
		const report = await after((db) => {
			edited(3, /"at":"([^"]*)000Z"/, '"at":"$1001Z"')(db);
			db.exec(`update entry set at = json_extract(body, '$.at') where seq = 3`);
		});
		expect(named(report)[0]).toBe('entry E-3');
	});

	test('removed from the middle', async () => {
		const report = await after((db) => db.exec('delete from entry where seq = 3'));
		expect(named(report)).toContain('entry E-3');
		expect(words(report, 'entry')).toBe('seq: it is missing; E-4 follows E-2');
		expect(report.notChecked.join()).toContain('Projected tables');
	});

	test('removed and the rest renumbered, the tree rebuilt', async () => {
		const report = await after((db) => {
			db.exec('delete from entry where seq = 2');
			for (let seq = 3; seq < 8; seq++) {
				const body = bodyAt(db, seq)
					.replace(`"seq":${seq}`, `"seq":${seq - 1}`)
					.replace(/"prev":(\d+)/, (text, prev) => (Number(prev) > 2 ? `"prev":${prev - 1}` : text));
				db.prepare('update entry set seq = ?, body = ? where seq = ?').run(seq - 1, body, seq);
			}
			db.exec('update entry_subject set seq = seq - 1 where seq > 2; update log_head set size = 7');
			rebuildTree(db);
		});
		expect(named(report)).toContain('checkpoint checkpoint 5');
		expect(words(report, 'entry')).toBe('subjects: M-002 is counted 2 after 0');
	});

	test('the last ones removed, with their nodes and rows', async () => {
		const report = await after((db) => {
			db.exec(`delete from entry where seq > 5; delete from entry_subject where seq > 5;
				update log_head set size = 6, at = (select at from entry where seq = 5)`);
			rebuildTree(db);
		});
		expect(named(report)).toContain('checkpoint checkpoint 7');
		expect(words(report, 'checkpoint')).toBe('size: it was signed over 7 entries, 6 are here');
	});

	test('two swapped', async () => {
		const report = await after((db) => {
			const [a, b] = [bodyAt(db, 1), bodyAt(db, 2)];
			setBody(db, 1, b);
			setBody(db, 2, a);
		});
		expect(named(report)[0]).toBe('entry E-1');
	});

	test('copied in at the end, the tree rebuilt', async () => {
		const report = await after((db) => {
			db.exec(
				`insert into entry select 8, at, type, actor, body from entry where seq = 7; update log_head set size = 9`
			);
			rebuildTree(db);
		});
		expect(named(report)[0]).toBe('entry E-8');
		expect(words(report, 'entry')).toBe('the column seq says 8, the bytes say 7');
	});

	test('a changed one with the whole tree rebuilt still contradicts the signed checkpoints', async () => {
		const report = await after((db) => {
			edited(2, 'Forecasts deposit', 'Forecasts another')(db);
			rebuildTree(db);
			db.exec(`update model set purpose = 'Forecasts another volumes' where ref = 'M-002';
				update entry_change set after = replace(after, 'Forecasts deposit', 'Forecasts another') where entry = 2`);
		});
		expect(named(report)).toEqual(['checkpoint checkpoint 5']);
		expect(words(report, 'checkpoint')).toContain(
			'root: the entries E-0 to E-4 are not those it was signed over'
		);
	});

	test.each<[string, (body: string) => string | Buffer]>([
		['a trailing blank', (body) => `${body} `],
		['a duplicate key', (body) => body.replace('"v":1', '"v":1,"v":1')],
		['keys reordered', (body) => body.replace(/^\{("actor":"system"),(.*)\}$/, '{$2,$1}')],
		['1 written 1.0', (body) => body.replace('"v":1', '"v":1.0')],
		['text not in NFC', (body) => body.replace('Forecasts', 'Fo\u0301recasts')],
		['a byte order mark', (body) => `\ufeff${body}`],
		['half a surrogate pair', (body) => body.replace('Forecasts', '\\ud800')],
		[
			'broken UTF-8',
			(body) => Buffer.concat([Buffer.from(body.slice(0, -2)), Buffer.of(0xff), Buffer.from(body.slice(-2))])
		],
		['an unknown type', (body) => body.replaceAll('model.registered', 'model.praised')],
		['a payload its schema does not know', (body) => body.replace('"purpose"', '"purposes"')]
	])('written otherwise, with the tree rebuilt: %s', async (_, change) => {
		const report = await after((db) => {
			const body = bodyAt(db, 2);
			const changed = change(body);
			expect(changed).not.toBe(body);
			setBody(db, 2, changed);
			db.exec(
				`update entry set type = coalesce(json_extract(body, '$.type'), type) where seq = 2 and json_valid(body)`
			);
			rebuildTree(db);
		});
		expect(named(report)[0]).toBe('entry E-2');
		expect(words(report, 'entry')).toMatch(/canonical|NFC|unknown event|schema/);
	});

	test('a time that falls, the tree rebuilt', async () => {
		const report = await after((db) => {
			edited(3, /"at":"2026/, '"at":"2025')(db);
			db.exec(`update entry set at = json_extract(body, '$.at') where seq = 3`);
			rebuildTree(db);
		});
		expect(words(report, 'entry')).toContain('order: its time');
	});
});

describe('the tree', () => {
	test.each([
		['an inner node', position(1, 1), `node ${position(1, 1)}`],
		['a higher node', position(2, 0), `node ${position(2, 0)}`]
	])('%s changed', async (_, pos, where) => {
		const report = await after((db) =>
			db.prepare('update node set hash = zeroblob(32) where pos = ?').run(pos)
		);
		expect(named(report)).toEqual([`node ${where}`]);
	});

	test('a leaf changed', async () => {
		const report = await after((db) =>
			db.prepare('update node set hash = zeroblob(32) where pos = ?').run(position(0, 5))
		);
		expect(named(report)).toEqual(['entry E-5', `node node ${position(1, 2)}`]);
	});

	test('the last node removed, and one too many', async () => {
		const last = position(0, 8) - 1;
		expect(named(await after((db) => db.exec(`delete from node where pos = ${last}`)))).toEqual([
			`node node ${last}`
		]);
		expect(
			named(await after((db) => db.exec(`insert into node values (${last + 1}, zeroblob(32))`)))
		).toEqual([`node node ${last + 1}`]);
	});
});

describe('a checkpoint', () => {
	const resigned = (db: Sqlite.Database, size: number, name: string): void => {
		const { privateKey } = generateKeyPairSync('ed25519');
		const root = db
			.prepare<[number], Buffer>('select root from checkpoint where size = ?')
			.pluck()
			.get(size)!;
		const note = signCheckpointText(
			{ origin: name, size, root },
			verifierOf(name, rawPublicKey(privateKey)),
			privateKey
		);
		db.prepare('update checkpoint set note = ? where size = ?').run(note, size);
	};

	test('signed again with another key of the same name', async () => {
		const report = await after((db) => resigned(db, 5, key.split('+')[0]!));
		expect(named(report)).toEqual(['checkpoint checkpoint 5']);
		expect(words(report, 'checkpoint')).toBe('note: no known key signed the note');
	});

	test('one character of its signature', async () => {
		const report = await after((db) =>
			db.exec(
				`update checkpoint set note = substr(note, 1, length(note) - 20) || 'AAAA' || substr(note, -16) where size = 7`
			)
		);
		expect(named(report)).toEqual(['checkpoint checkpoint 7']);
	});

	test('its root column, and its size', async () => {
		expect(
			words(
				await after((db) => db.exec('update checkpoint set root = zeroblob(32) where size = 5')),
				'checkpoint'
			)
		).toMatch(/^root/);
		expect(
			words(await after((db) => db.exec('update checkpoint set size = 6 where size = 7')), 'checkpoint')
		).toMatch(/^root/);
	});

	test('a line too many under the root', async () => {
		const report = await after((db) =>
			db.exec(
				`update checkpoint set note = replace(note, x'0a0a', x'0a' || 'more' || x'0a0a') where size = 5`
			)
		);
		expect(named(report)).toEqual(['checkpoint checkpoint 5']);
	});

	test('everything signed again with a fresh key: seen by whoever noted the old one', async () => {
		const other = verifierText(
			verifierOf(key.split('+')[0]!, rawPublicKey(generateKeyPairSync('ed25519').privateKey))
		);
		const report = await verify(sound, other);
		expect(named(report)).toEqual(['checkpoint key']);
		expect((await verifyRegister({ file: sound, projectors })).unvouched).toBe(true);
	});
});

describe('a projected table', () => {
	test('a cell', async () => {
		const report = await after((db) => db.exec(`update model set name = 'Better' where ref = 'M-002'`));
		expect(named(report)).toEqual(['table model M-002']);
		expect(report.differences).toEqual([
			{ table: 'model', key: 'M-002', column: 'name', live: 'Better', replayed: 'Model M-002', entry: 7 - 1 }
		]);
	});

	test('a row added', async () => {
		const report = await after((db) => db.exec(`insert into model_use values ('M-002', 'Pricing', 2)`));
		expect(named(report)).toEqual(['table model_use M-002 Pricing']);
		expect(words(report, 'table')).toContain('the log knows no such row');
	});

	test('a row removed', async () => {
		const report = await after((db) => db.exec(`delete from model_use where model = 'M-002'`));
		expect(named(report)).toEqual(['table model_use M-002 IFRS 9']);
		expect(words(report, 'table')).toBe('the row is missing, written by E-2');
	});

	test('the entries of two rows swapped', async () => {
		const report = await after((db) =>
			db.exec(`update model set entry = (select sum(entry) from model) - entry`)
		);
		expect(report.differences.map(({ key: row, column }) => [row, column])).toEqual([
			['M-001', 'entry'],
			['M-002', 'entry']
		]);
	});

	test('a number by its last bit', async () => {
		const report = await after((db) => db.exec('update prior set high = 1.2500000000000002'));
		expect(report.differences).toMatchObject([
			{ table: 'prior', column: 'high', live: 1.2500000000000002, replayed: 1.25 }
		]);
	});
});

describe('what stands beside', () => {
	test('a row of entry_subject lost, and one added', async () => {
		expect(
			named(await after((db) => db.exec(`delete from entry_subject where ref = 'M-001' and n = 2`)))
		).toEqual(['subject E-3']);
		expect(named(await after((db) => db.exec(`insert into entry_subject values ('M-009', 1, 5)`)))).toEqual([
			'subject E-5'
		]);
	});

	test('the gate left open', async () => {
		const report = await after((db) => db.exec('insert into current_entry values (7)'));
		expect(named(report)).toEqual(['gate current_entry']);
	});

	test.each([1, -1])('log_head by %i', async (step) => {
		const report = await after((db) => db.exec(`update log_head set size = size + ${step}`));
		expect(named(report)).toEqual(['head log_head']);
	});

	test('a byte of a blob, and a blob removed', async () => {
		const digest = await after((db) => db.exec(`update blob set bytes = cast('{"tiers":{}}' as blob)`));
		expect(named(digest)[0]).toMatch(/^blob sha256:/);
		const lost = await after((db) => db.exec('delete from blob'));
		expect(words(lost, 'blob')).toBe('is named by E-5 and missing');
	});

	test('a weaker trigger, and one missing', async () => {
		const weaker = await after((db) => {
			db.exec(`drop trigger entry_no_update;
				create trigger entry_no_update before update on entry begin select raise(abort, 'no') where 0; end`);
		}, true);
		expect(named(weaker)).toEqual(['schema trigger entry_no_update']);
		expect(named(await after((db) => db.exec('drop trigger model_gate_update'), true))).toEqual([
			'schema trigger model_gate_update'
		]);
	});
});
