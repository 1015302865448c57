import { projectionGates, raiseGates } from '$lib/server/db/gates';
import { migrate } from '$lib/server/db/migrate';
import { openMemory, openReader, openWriter } from '$lib/server/db/open';
import type Sqlite from 'better-sqlite3';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, test } from 'vitest';

/** Attempts by plain SQL on a handle opened as the application opens its own. */
let db: Sqlite.Database;

const at = '2026-03-02T09:00:00.000Z';
const body = (seq: number | null, other: object = {}): string =>
	JSON.stringify({ seq, at, type: 'app.started', actor: 'system', ...other });
const entry = (verb: string, seq: number | null, text = body(seq), time = at): string =>
	`${verb} into entry (seq, at, type, actor, body) values (${seq}, '${time}', 'app.started', 'system', '${text}')`;
const node = (verb: string, pos: number): string =>
	`${verb} into node (pos, hash) values (${pos}, zeroblob(32))`;
const write = (...statements: string[]): void => {
	db.exec(['begin immediate', ...statements, 'commit'].join(';'));
};
const close = 'delete from current_entry';

// A stand-in for any projected table: all gates are made by the same function.
const thing = 'create table thing (id text primary key, value text, entry integer not null) strict';

beforeEach(async () => {
	db = openMemory();
	await migrate(db);
	raiseGates(db);
	db.exec(thing);
	for (const [, sql] of projectionGates('thing')) db.exec(sql);
	for (const seq of [0, 1, 2]) write(entry('insert', seq), node('insert', seq), close);
	write(entry('insert', 3), `insert into thing values ('a', 'x', 3)`, close);
});
afterEach(() => db.close());

const attempt = (...statements: string[]): string => {
	try {
		write(...statements);
		return 'committed';
	} catch (cause) {
		return (cause as Error).message;
	} finally {
		if (db.inTransaction) db.exec('rollback');
	}
};
const counts = (): unknown =>
	['entry', 'node', 'thing', 'current_entry'].map((table) =>
		db.prepare(`select count(*) from ${table}`).pluck().get()
	);

describe('what is written stays', () => {
	test.each(['entry', 'node', 'entry_subject', 'checkpoint', 'blob'])('%s', (table) => {
		if (table === 'entry_subject')
			write(entry('insert', 4), `insert into entry_subject values ('M-001', 1, 4)`, close);
		if (table === 'checkpoint') write(`insert into checkpoint values (4, zeroblob(32), 'n', '${at}')`);
		if (table === 'blob') write(`insert into blob values ('sha256:${'0'.repeat(64)}', 1, x'00')`);
		const column = { entry: 'body', node: 'hash', entry_subject: 'seq', checkpoint: 'note', blob: 'bytes' }[
			table
		];
		const [key] = db.pragma(`table_info(${table})`) as { name: string }[];
		for (const statement of [
			`update ${table} set ${column} = ${column}`,
			`update or replace ${table} set ${key!.name} = ${key!.name}`,
			`update or ignore ${table} set ${column} = ${column}`,
			`delete from ${table} where rowid in (select rowid from ${table} limit 1)`.replace(
				/where.*/,
				table === 'entry_subject'
					? 'where n = 1'
					: `where ${key!.name} = (select max(${key!.name}) from ${table})`
			),
			`delete from ${table}`
		])
			expect(attempt(statement), statement).toBe(`${table}: append only`);
	});
});

describe('trap-03: writing over an entry', () => {
	const before = (): unknown => db.prepare('select body from entry where seq = 1').pluck().get();

	test.each([
		['insert or replace', entry('insert or replace', 1)],
		['replace', entry('replace', 1)],
		['insert or ignore', entry('insert or ignore', 1)],
		['upsert do update', `${entry('insert', 1)} on conflict (seq) do update set body = excluded.body`],
		['upsert do nothing', `${entry('insert', 1)} on conflict (seq) do nothing`],
		['a gap', entry('insert', 5)],
		['a negative folio', entry('insert', -1)],
		['no folio', entry('insert', null, body(4))]
	])('%s', (_, statement) => {
		const [size, text] = [counts(), before()];
		expect(attempt(statement)).toBe('entry: out of sequence');
		expect([counts(), before()]).toEqual([size, text]);
	});

	test('nodes and subjects are held to their order too', () => {
		expect(attempt(node('insert or replace', 1))).toBe('node: out of sequence');
		expect(attempt(node('insert', 9))).toBe('node: out of sequence');
		expect(attempt(entry('insert', 4), `insert into entry_subject values ('M-001', 2, 4)`, close)).toBe(
			'entry_subject: out of sequence'
		);
		expect(attempt(entry('insert', 4), `insert into entry_subject values ('M-001', 1, 2)`, close)).toBe(
			'entry_subject: out of sequence'
		);
	});

	test('a replacement over a second unique key deletes without triggers unless they recurse', () => {
		const plain = openMemory();
		plain.exec(`create table pair (a integer primary key, b integer unique) strict;
			create trigger keep before delete on pair begin select raise(abort, 'kept'); end;
			insert into pair values (1, 1)`);
		const over = 'insert or replace into pair values (2, 1)';
		expect(() => plain.exec(over)).toThrow('kept');
		plain.pragma('recursive_triggers = off');
		expect(() => plain.exec(over)).not.toThrow();
		plain.close();
	});
});

describe('trap-02: columns are bound to the bytes', () => {
	test.each([
		['another folio', body(4, { seq: 5 })],
		['another time', body(4, { at: '2026-03-03T09:00:00.000Z' })],
		['another type', body(4, { type: 'log.opened' })],
		['another actor', body(4, { actor: 'cli' })],
		['no JSON', '{'],
		['more than 64 KiB', body(4, { x: 'x'.repeat(65_536) })]
	])('%s', (_, text) =>
		expect(attempt(entry('insert', 4, text))).toMatch(/CHECK constraint failed|malformed JSON/)
	);

	test('a clock that runs backwards', () => {
		const earlier = '2026-03-02T08:59:59.999Z';
		expect(attempt(entry('insert', 4, body(4, { at: earlier }), earlier))).toBe(
			'entry: clock runs backwards'
		);
	});

	test('OR IGNORE passes over a failing CHECK in silence, which is why it is never used', () => {
		const text = body(4, { seq: 9 });
		expect(db.prepare(entry('insert or ignore', 4, text)).run().changes).toBe(0);
	});
});

describe('the gate', () => {
	const open = entry('insert', 4);

	test('an entry committed without closing it', () => {
		expect(attempt(open)).toContain('FOREIGN KEY');
		expect(attempt('pragma defer_foreign_keys = on', open)).toContain('FOREIGN KEY');
		expect(counts()).toEqual([4, 3, 1, 0]);
	});

	test('trap-04: without foreign keys it would be silent', () => {
		db.pragma('foreign_keys = off');
		expect(attempt(open)).toBe('committed');
	});

	test.each([
		['insert', `insert into thing values ('b', 'y', 3)`],
		['update', `update thing set value = 'y'`],
		['update or replace', `update or replace thing set value = 'y'`],
		['delete', `delete from thing`],
		['replace', `replace into thing values ('a', 'y', 3)`]
	])('%s without a fresh entry, with and without recursive triggers', (_, statement) => {
		expect(attempt(statement)).toBe('thing: no fresh entry');
		db.pragma('recursive_triggers = off');
		expect(attempt(statement)).toBe('thing: no fresh entry');
	});

	test('a row that names another entry', () => {
		expect(attempt(open, `insert into thing values ('b', 'y', 3)`, close)).toBe('thing: no fresh entry');
		expect(attempt(open, `update thing set value = 'y'`, close)).toBe('thing: no fresh entry');
		expect(attempt(open, close, `insert into thing values ('b', 'y', 4)`)).toBe('thing: no fresh entry');
		expect(attempt(open, `update thing set value = 'y', entry = 4`, close)).toBe('committed');
	});

	test.each([
		['an old folio', 'insert into current_entry values (3)'],
		['the next folio', 'insert into current_entry values (4)'],
		['moving it', `${open}; update current_entry set seq = 3`]
	])('opened by hand: %s', (_, statement) => expect(attempt(statement)).toMatch(/^current_entry: /));

	test.each([
		['forward', 'update log_head set size = size + 1'],
		['back', 'update log_head set size = size - 1'],
		['another time', `update log_head set at = ''`],
		['a second row', `insert into log_head values (2, 0, '')`],
		['replaced', `insert or replace into log_head values (1, 9, '')`],
		['removed', 'delete from log_head']
	])('log_head moved by hand: %s', (_, statement) => expect(attempt(statement)).toMatch(/^log_head: /));

	test('never can hold no row', () =>
		expect(attempt('insert into never values (4)')).toContain('CHECK constraint'));

	test('several entries in one transaction: each opens after the one before is closed', () => {
		expect(
			attempt(
				open,
				`insert into thing values ('b', 'y', 4)`,
				close,
				entry('insert', 5),
				`update thing set value = 'z', entry = 5 where id = 'b'`,
				close
			)
		).toBe('committed');
		expect(db.prepare('select size from log_head').pluck().get()).toBe(6);
	});

	test('a checkpoint beyond the log, or not beyond the last one', () => {
		const checkpoint = (size: number): string =>
			`insert into checkpoint values (${size}, zeroblob(32), 'n', '${at}')`;
		expect(attempt(checkpoint(5))).toBe('checkpoint: out of sequence');
		expect(attempt(checkpoint(4))).toBe('committed');
		expect(attempt(checkpoint(3))).toBe('checkpoint: out of sequence');
	});
});

test('trap-05: dropping a trigger fires no trigger, and the next start raises it again', () => {
	db.exec('drop trigger entry_no_update');
	expect(attempt(`update entry set body = '{}' where 0`)).toBe('committed');
	raiseGates(db);
	expect(attempt('update entry set body = body')).toBe('entry: append only');
});

describe('trap-01: settings are read back', () => {
	test('the writer is durable at every commit, the reader cannot write', async () => {
		const folder = mkdtempSync(join(tmpdir(), 'keelbook-'));
		const file = join(folder, 'keelbook.db');
		const writer = openWriter(file);
		await migrate(writer);
		raiseGates(writer);
		writer.exec(`begin immediate; ${entry('insert', 0)}; ${close}; commit`);
		const read = (name: string): unknown => writer.pragma(name, { simple: true });
		expect(read('synchronous')).toBe(2);
		expect(read('journal_mode')).toBe('wal');
		expect(read('foreign_keys')).toBe(1);
		expect(read('recursive_triggers')).toBe(1);
		const reader = openReader(file);
		expect(() => reader.exec(node('insert', 0))).toThrow('readonly');
		expect(() => writer.pragma('writable_schema = on')).not.toThrow();
		expect(() => writer.exec(`update sqlite_schema set sql = ''`)).toThrow();
		expect(() => writer.prepare('select 1; select 2')).toThrow('more than one statement');
		reader.close();
		writer.close();
		rmSync(folder, { recursive: true });
	});

	test("another application's database is refused", () => {
		const folder = mkdtempSync(join(tmpdir(), 'keelbook-'));
		const file = join(folder, 'other.db');
		const other = openWriter(file);
		other.pragma('application_id = 7');
		other.close();
		expect(() => openWriter(file)).toThrow('another application');
		rmSync(folder, { recursive: true });
	});
});
