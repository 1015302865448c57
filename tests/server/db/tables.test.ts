import { expectedTriggers, presentTriggers, raiseGates } from '$lib/server/db/gates';
import { migrate } from '$lib/server/db/migrate';
import { openMemory } from '$lib/server/db/open';
import { logTables, outsideTables, projectedTables } from '$lib/server/db/tables';
import type Sqlite from 'better-sqlite3';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';

let db: Sqlite.Database;
beforeAll(async () => {
	db = openMemory();
	await migrate(db);
	raiseGates(db);
});
afterAll(() => db.close());

test('every table of the file stands in exactly one list', () => {
	const present = db
		.prepare<[], string>(`select name from sqlite_schema where type = 'table' and name not like 'sqlite_%'`)
		.pluck()
		.all();
	expect([...logTables, ...projectedTables, ...outsideTables].sort()).toEqual(present.sort());
});

describe.each(projectedTables)('the projected table %s', (table) => {
	test('is strict, has a key of its own and names the entry that wrote each row', () => {
		const [info] = db.pragma(`table_list(${table})`) as { strict: number }[];
		expect(info?.strict).toBe(1);
		const columns = db.pragma(`table_info(${table})`) as {
			name: string;
			type: string;
			notnull: number;
			pk: number;
		}[];
		expect(columns.some(({ pk }) => pk > 0)).toBe(true);
		expect(columns.find(({ name }) => name === 'entry')).toMatchObject({ type: 'INTEGER', notnull: 1 });
	});

	test('is gated', () => {
		const names = [...presentTriggers(db).keys()];
		for (const verb of ['insert', 'update', 'delete']) expect(names).toContain(`${table}_gate_${verb}`);
	});
});

test('every trigger is one that the code makes', () => {
	expect(presentTriggers(db)).toEqual(expectedTriggers(db));
});
