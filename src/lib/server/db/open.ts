import Sqlite from 'better-sqlite3';
import { StartFault } from '../start-fault';

/** "KEEL": marks the file as a register. */
export const applicationId = 0x4b45454c;

type Setting = readonly [pragma: string, set: string, read: unknown];

/** Settings of every connection; each is read back, since SQLite ignores what it cannot do in silence. */
const common: readonly Setting[] = [
	['foreign_keys', 'ON', 1],
	['recursive_triggers', 'ON', 1],
	['trusted_schema', 'OFF', 0],
	['cell_size_check', 'ON', 1],
	['mmap_size', '0', 0],
	['busy_timeout', '5000', 5000],
	['temp_store', 'MEMORY', 2]
];

const writing: readonly Setting[] = [
	['journal_mode', 'WAL', 'wal'],
	['synchronous', 'FULL', 2],
	...common,
	['wal_autocheckpoint', '1000', 1000],
	['journal_size_limit', String(64 * 1024 * 1024), 64 * 1024 * 1024],
	['secure_delete', 'ON', 1],
	['encoding', "'UTF-8'", 'UTF-8'],
	['application_id', String(applicationId), applicationId]
];

const readBack = (db: Sqlite.Database, [pragma, , expected]: Setting): void => {
	const found: unknown = db.pragma(pragma, { simple: true });
	// mmap_size answers with no row where mapping is compiled out.
	if (found !== expected && !(pragma === 'mmap_size' && found === undefined))
		throw new StartFault(70, `SQLite answers ${pragma} = ${String(found)} instead of ${String(expected)}`);
};

const apply = (db: Sqlite.Database, settings: readonly Setting[]): Sqlite.Database => {
	for (const setting of settings) {
		db.pragma(`${setting[0]} = ${setting[1]}`);
		readBack(db, setting);
	}
	return db;
};

const opened = (
	file: string,
	options: Sqlite.Options,
	set: (db: Sqlite.Database) => void
): Sqlite.Database => {
	const db = new Sqlite(file, options);
	try {
		set(db);
		return db;
	} catch (cause) {
		db.close();
		throw cause;
	}
};

/** The one writing connection of a register's file, durable at COMMIT. @throws StartFault 70 */
export const openWriter = (file: string): Sqlite.Database =>
	opened(file, {}, (db) => {
		const foreign = db.pragma('application_id', { simple: true });
		if (foreign !== 0 && foreign !== applicationId)
			throw new StartFault(70, `${file} is a database of another application`);
		apply(db, writing);
		// SQLite may lower this at the first write when it was never set: written once, then read back.
		db.pragma('user_version = ' + String(db.pragma('user_version', { simple: true })));
		readBack(db, ['synchronous', 'FULL', 2]);
	});

/** A connection that can only read. */
export const openReader = (file: string): Sqlite.Database =>
	opened(file, { readonly: true, fileMustExist: true }, (db) => {
		apply(db, [...common, ['query_only', 'ON', 1]]);
	});

/** An empty database in memory, for views of the past and for comparing. */
export const openMemory = (): Sqlite.Database => opened(':memory:', {}, (db) => void apply(db, common));
