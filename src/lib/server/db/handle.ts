import type Sqlite from 'better-sqlite3';
import {
	DummyDriver,
	Kysely,
	SqliteAdapter,
	SqliteIntrospector,
	SqliteQueryCompiler,
	type Compilable
} from 'kysely';
import type { Schema } from './schema';

/**
 * Statements are built with Kysely and run at once on better-sqlite3: one code path for the live register, for a
 * transaction of the writer and for a replayed view of the past, and no await inside a transaction.
 */
export interface Handle {
	/** Builds statements; it has no connection and executes nothing itself. */
	readonly q: Kysely<Schema>;
	all<R>(query: Compilable<R>): R[];
	first<R>(query: Compilable<R>): R | undefined;
}

type Table = keyof Schema & string;
type Row<T extends Table> = Schema[T];

/** The writer inside its transaction. */
export interface Tx extends Handle {
	/** Runs a statement and returns the number of changed rows. */
	run(query: Compilable<unknown>): number;
	/** Inserts one row; compiled once per table and set of columns; throws unless exactly one row changed. */
	insert<T extends Table>(table: T, row: Row<T>): void;
	/** Updates the rows that equal `key`; throws unless exactly one row changed. */
	update<T extends Table>(table: T, key: Partial<Row<T>>, set: Partial<Row<T>>): void;
	/** Deletes the rows that equal `key` and returns their number. */
	remove<T extends Table>(table: T, key: Partial<Row<T>>): number;
}

const builder = new Kysely<Schema>({
	dialect: {
		createAdapter: () => new SqliteAdapter(),
		createDriver: () => new DummyDriver(),
		createIntrospector: (db) => new SqliteIntrospector(db),
		createQueryCompiler: () => new SqliteQueryCompiler()
	}
});

const quoted = (name: string): string => `"${name}"`;
const equals = (columns: readonly string[], join: string): string =>
	columns.map((column) => `${quoted(column)} = ?`).join(join);

/** Opens a handle over a connection; prepared statements are kept by their text. */
export const handle = (sqlite: Sqlite.Database): Tx => {
	const prepared = new Map<string, Sqlite.Statement>();
	const statement = (sql: string): Sqlite.Statement => {
		let found = prepared.get(sql);
		if (!found) prepared.set(sql, (found = sqlite.prepare(sql)));
		return found;
	};
	/** Statements of insert, update and remove by table and columns: the text is built once. */
	const shaped = new Map<string, Sqlite.Statement>();
	const ofShape = (shape: string, sql: () => string): Sqlite.Statement => {
		let found = shaped.get(shape);
		if (!found) shaped.set(shape, (found = sqlite.prepare(sql())));
		return found;
	};
	const compile = (query: Compilable<unknown>): [Sqlite.Statement, readonly unknown[]] => {
		const { sql, parameters } = query.compile();
		return [statement(sql), parameters];
	};
	const one = (changes: number, what: string): void => {
		if (changes !== 1) throw new Error(`${what} changed ${changes} rows instead of one`);
	};
	return Object.freeze({
		q: builder,
		all<R>(query: Compilable<R>): R[] {
			const [prepare, parameters] = compile(query);
			return prepare.all(...parameters) as R[];
		},
		first<R>(query: Compilable<R>): R | undefined {
			const [prepare, parameters] = compile(query);
			return prepare.get(...parameters) as R | undefined;
		},
		run(query: Compilable<unknown>): number {
			const [prepare, parameters] = compile(query);
			return prepare.run(...parameters).changes;
		},
		insert(table: string, row: object): void {
			const columns = Object.keys(row);
			const insert = ofShape(
				`+${table}:${columns.join()}`,
				() =>
					`insert into ${quoted(table)} (${columns.map(quoted).join(', ')}) values (${columns.map(() => '?').join(', ')})`
			);
			one(insert.run(...Object.values(row)).changes, `Insert into ${table}`);
		},
		update(table: string, key: object, set: object): void {
			const [by, columns] = [Object.keys(key), Object.keys(set)];
			const update = ofShape(
				`=${table}:${columns.join()}:${by.join()}`,
				() => `update ${quoted(table)} set ${equals(columns, ', ')} where ${equals(by, ' and ')}`
			);
			one(update.run(...Object.values(set), ...Object.values(key)).changes, `Update of ${table}`);
		},
		remove(table: string, key: object): number {
			const by = Object.keys(key);
			const remove = ofShape(
				`-${table}:${by.join()}`,
				() => `delete from ${quoted(table)} where ${equals(by, ' and ')}`
			);
			return remove.run(...Object.values(key)).changes;
		}
	});
};
