import type Sqlite from 'better-sqlite3';
import { Kysely, Migrator, SqliteDialect, type Migration } from 'kysely';
import { StartFault } from '../start-fault';

/** Every step of the tables, bundled with the code: nothing is read from disk. */
const released = import.meta.glob<Migration>('/migrations/*.ts', { eager: true });

/** Steps by name, in order, each in a transaction of its own: a failing one leaves nothing behind. */
const steps: Record<string, Migration> = Object.fromEntries(
	Object.entries(released)
		.map(([path, { up }]): [string, Migration] => [
			path.replace(/^.*\/|\.ts$/g, ''),
			{ up: (db) => db.transaction().execute((tx) => up(tx)) }
		])
		.sort(([a], [b]) => (a < b ? -1 : 1))
);

/** Number of the newest step, kept in the file as `user_version`. */
export const newestMigration: number = Object.keys(steps).length;

/**
 * Brings a database to the newest tables.
 * @throws StartFault 76 when the file knows more steps than this code; the step's own error when one fails.
 */
export const migrate = async (sqlite: Sqlite.Database): Promise<void> => {
	const version = sqlite.pragma('user_version', { simple: true }) as number;
	if (version > newestMigration)
		throw new StartFault(76, `The file is at step ${version}, this release knows ${newestMigration} steps`);
	// The connection stays open: Kysely would close what it is given on destroy().
	const db = new Kysely<unknown>({ dialect: new SqliteDialect({ database: sqlite }) });
	const { error } = await new Migrator({
		db,
		provider: { getMigrations: async () => steps }
	}).migrateToLatest();
	if (error) throw error;
	sqlite.pragma(`user_version = ${newestMigration}`);
};
