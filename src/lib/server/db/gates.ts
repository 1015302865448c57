import type Sqlite from 'better-sqlite3';
import { recorder, type Column } from './change-triggers';
import { projectedTables } from './tables';

// SQLite keeps the text of a trigger with these two words in capitals: so it can be compared.
const abort = (name: string, when: string, words: string, condition?: string): [string, string] => [
	name,
	`CREATE TRIGGER ${name} ${when} begin select raise(abort, '${words}')${condition ? ` where ${condition}` : ''}; end`
];

const immutable = (table: string): [string, string][] => [
	abort(`${table}_no_update`, `before update on ${table}`, `${table}: append only`),
	abort(`${table}_no_delete`, `before delete on ${table}`, `${table}: append only`)
];

/** The order of the log: entries, nodes, subjects and checkpoints only grow, at their end. */
const order: readonly [string, string][] = [
	abort(
		'entry_order',
		'before insert on entry',
		'entry: out of sequence',
		'new.seq is not (select coalesce(max(seq) + 1, 0) from entry)'
	),
	abort(
		'entry_clock',
		'before insert on entry',
		'entry: clock runs backwards',
		'new.at < (select at from entry order by seq desc limit 1)'
	),
	abort(
		'node_order',
		'before insert on node',
		'node: out of sequence',
		'new.pos is not (select coalesce(max(pos) + 1, 0) from node)'
	),
	abort(
		'entry_subject_order',
		'before insert on entry_subject',
		'entry_subject: out of sequence',
		'new.n is not (select coalesce(max(n) + 1, 1) from entry_subject where ref = new.ref)' +
			' or new.seq is not (select max(seq) from entry)'
	),
	abort(
		'checkpoint_order',
		'before insert on checkpoint',
		'checkpoint: out of sequence',
		'new.size <= (select coalesce(max(size), 0) from checkpoint) or new.size > (select size from log_head)'
	)
];

/** The commit gate: it opens with an entry and closes once, moving the head of the log. */
const gate: readonly [string, string][] = [
	[
		'entry_open',
		'CREATE TRIGGER entry_open after insert on entry begin' +
			' delete from current_entry; insert into current_entry (seq) values (new.seq); end'
	],
	abort(
		'current_fresh',
		'before insert on current_entry',
		'current_entry: not the entry being written',
		'exists (select 1 from current_entry) or new.seq is not (select max(seq) from entry)' +
			' or new.seq is not (select size from log_head)'
	),
	abort('current_no_update', 'before update on current_entry', 'current_entry: moves only by an entry'),
	[
		'current_close',
		'CREATE TRIGGER current_close after delete on current_entry begin' +
			' update log_head set size = old.seq + 1, at = (select at from entry where seq = old.seq); end'
	],
	abort(
		'head_forward',
		'before update on log_head',
		'log_head: moves only by an entry',
		'new.size is not old.size + 1 or new.size is not (select max(seq) + 1 from entry)' +
			' or new.at is not (select at from entry where seq = old.size) or new.one is not 1'
	),
	abort('head_no_insert', 'before insert on log_head', 'log_head: holds one row'),
	abort('head_no_delete', 'before delete on log_head', 'log_head: holds one row')
];

/** The gates of a projected table: a row changes only while an entry is being written, and names it. */
export const projectionGates = (table: string): [string, string][] => [
	...['insert', 'update'].map((verb) =>
		abort(
			`${table}_gate_${verb}`,
			`before ${verb} on ${table}`,
			`${table}: no fresh entry`,
			'new.entry is not (select seq from current_entry)'
		)
	),
	abort(
		`${table}_gate_delete`,
		`before delete on ${table}`,
		`${table}: no fresh entry`,
		'not exists (select 1 from current_entry)'
	)
];

const projectionTriggers = (sqlite: Sqlite.Database, table: string): [string, string][] => {
	const columns = sqlite.pragma(`table_info("${table}")`) as Column[];
	if (table === 'entry_change') return projectionGates(table);
	return [
		...projectionGates(table),
		...(['insert', 'update', 'delete'] as const).map((verb) => recorder(table, verb, columns))
	];
};

const byTable: ReadonlyMap<string, readonly (readonly [string, string])[]> = new Map([
	['log_head', [...order, ...gate]],
	...['entry', 'entry_subject', 'node', 'checkpoint', 'blob'].map(
		(table) => [table, immutable(table)] as const
	)
]);
const isProjected: ReadonlySet<string> = new Set(projectedTables);

/** The triggers a database must have, by name, with their text as `sqlite_schema` keeps it. */
export const expectedTriggers = (sqlite: Sqlite.Database): Map<string, string> => {
	const tables = sqlite
		.prepare<[], string>(`select name from sqlite_schema where type = 'table'`)
		.pluck()
		.all();
	return new Map(
		tables.flatMap((table) =>
			isProjected.has(table) ? projectionTriggers(sqlite, table) : (byTable.get(table) ?? [])
		)
	);
};

/** The triggers a database has, by name. */
export const presentTriggers = (sqlite: Sqlite.Database): Map<string, string> =>
	new Map(
		sqlite
			.prepare<[], { name: string; sql: string }>(
				`select name, sql from sqlite_schema where type = 'trigger'`
			)
			.all()
			.map(({ name, sql }) => [name, sql])
	);

/** Makes the triggers what the code says, in one transaction; touches nothing where they already are. */
export const raiseGates = (sqlite: Sqlite.Database): void => {
	const present = presentTriggers(sqlite);
	const expected = expectedTriggers(sqlite);
	const stale = [...present].filter(([name, sql]) => expected.get(name) !== sql).map(([name]) => name);
	const missing = [...expected].filter(([name, sql]) => present.get(name) !== sql);
	if (stale.length + missing.length === 0) return;
	sqlite.transaction(() => {
		for (const name of stale) sqlite.exec(`drop trigger "${name}"`);
		for (const [, sql] of missing) sqlite.exec(sql);
	})();
};
