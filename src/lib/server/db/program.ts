import { sql } from 'kysely';
import type { Handle } from './handle';

/** What reads this file: the version of SQLite and the number of migrations that made the tables. */
export const programOf = (handle: Handle): { sqlite: string; schema: number } => {
	const { sqlite } = handle.first(handle.q.selectNoFrom(sql<string>`sqlite_version()`.as('sqlite')))!;
	const { user_version: schema } = handle.first(
		handle.q.selectFrom(sql<{ user_version: number }>`pragma_user_version()`.as('p')).select('user_version')
	)!;
	return { sqlite, schema };
};
