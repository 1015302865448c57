import type Sqlite from 'better-sqlite3';
import { projectedTables } from '../db/tables';

/** The projected tables a database has, with the number of their rows. */
export const tableCounts = (sqlite: Sqlite.Database): ReadonlyMap<string, number> => {
	const present = new Set(
		sqlite.prepare<[], string>(`select name from sqlite_schema where type = 'table'`).pluck().all()
	);
	return new Map(
		projectedTables
			.filter((table) => present.has(table))
			.map((table) => [table, sqlite.prepare<[], number>(`select count(*) from "${table}"`).pluck().get()!])
	);
};
