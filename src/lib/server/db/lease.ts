import Sqlite from 'better-sqlite3';
import { StartFault } from '../start-fault';

/**
 * Holds the register for one process: a lock on a file of its own, taken for life and freed by the system when the
 * process ends, however it ends.
 * @throws StartFault 75 when another process holds it.
 */
export const takeLease = (file: string): { release: () => void } => {
	const lock = new Sqlite(file, { timeout: 0 });
	try {
		lock.exec('BEGIN EXCLUSIVE');
	} catch {
		lock.close();
		throw new StartFault(75, `Another process writes this register (it holds ${file}); stop it first.`);
	}
	return { release: () => lock.close() };
};
