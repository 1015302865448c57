import type Sqlite from 'better-sqlite3';
import { Kysely, Migrator, sql, SqliteDialect, type Migration } from 'kysely';
import { StartFault } from '../start-fault';

/** Every step of the tables, bundled with the code: nothing is read from disk. */
const released = import.meta.glob<Migration>('/migrations/*.ts', { eager: true });

const names: readonly string[] = Object.keys(released).sort();

/** Number of the newest step, kept in the file as `user_version`. */
export const newestMigration: number = names.length;

const versionOf = (sqlite: Sqlite.Database): number =>
	sqlite.pragma('user_version', { simple: true }) as number;

/**
 * Steps by name, in order. Each makes its tables and moves the number of the file in one transaction, so that a step that
 * is cut off leaves nothing behind and one that was done is never done twice, whatever Kysely managed to note of it.
 */
const stepsOf = (sqlite: Sqlite.Database): Record<string, Migration> =>
	Object.fromEntries(
		names.map((path, index): [string, Migration] => [
			path.replace(/^.*\/|\.ts$/g, ''),
			{
				up: async (db) => {
					if (versionOf(sqlite) > index) return;
					await db.transaction().execute(async (tx) => {
						await released[path]!.up(tx);
						await sql.raw(`pragma user_version = ${index + 1}`).execute(tx);
					});
				}
			}
		])
	);

/**
 * Brings a database to the newest tables.
 * @throws StartFault 76 when the file knows more steps than this code; the step's own error when one fails.
 */
export const migrate = async (sqlite: Sqlite.Database): Promise<void> => {
	const version = versionOf(sqlite);
	if (version > newestMigration)
		throw new StartFault(76, `The file is at step ${version}, this release knows ${newestMigration} steps`);
	// The connection stays open: Kysely would close what it is given on destroy().
	const db = new Kysely<unknown>({ dialect: new SqliteDialect({ database: sqlite }) });
	const migrations = stepsOf(sqlite);
	const { error } = await new Migrator({
		db,
		provider: { getMigrations: async () => migrations }
	}).migrateToLatest();
	if (error) throw error;
};
