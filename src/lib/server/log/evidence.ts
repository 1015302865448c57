import type Sqlite from 'better-sqlite3';
import { openReader } from '../db/open';

/** There is no register at this place. */
export class NoRegister extends Error {
	override readonly name = 'NoRegister';
}

/** Opens a register's file for looking at it only; it need not be sound. @throws NoRegister */
export const openEvidence = (file: string): Sqlite.Database => {
	let sqlite: Sqlite.Database | undefined;
	try {
		sqlite = openReader(file);
		sqlite.prepare('select seq, body from entry limit 1').get();
		return sqlite;
	} catch (cause) {
		sqlite?.close();
		throw new NoRegister(`${file} is not a register`, { cause });
	}
};
