import { system } from '$lib/domain/actor';
import type { Entry } from '$lib/domain/entry';
import type { EventType } from '$lib/domain/events';
import type Sqlite from 'better-sqlite3';
import { existsSync } from 'node:fs';
import type { Blobs, Ctx, Projectors } from '../context';
import { raiseGates } from '../db/gates';
import { handle, type Handle } from '../db/handle';
import { migrate } from '../db/migrate';
import { openReader, openWriter } from '../db/open';
import { StartFault } from '../start-fault';
import { openBlobs } from './blobs';
import { signHead } from './checkpoints';
import { logHead } from './head';
import { makeKey, readKey, type LogKey } from './keys';
import type { Log } from './log';
import { entryAt } from './log.queries';
import { verifierOfLog } from './opening';
import { record } from './record';
import { scheduleCheckpoints } from './schedule';
import { checkAtStart } from './start-checks';
import { openStore, type Store } from './store';

export interface LogOptions {
	/** The register's database. */
	readonly file: string;
	/** PEM of the signing key; made when the register is new. */
	readonly keyFile: string;
	/** What E-0 says of a new register. */
	readonly address: string;
	readonly institution: string;
	readonly demo: boolean;
	readonly projectors: Projectors;
	readonly now: () => Date;
}

export interface OpenedLog {
	/** The live register on a read-only connection. */
	readonly read: Handle;
	readonly write: Ctx['write'];
	readonly log: Log;
	readonly blobs: Blobs;
	/** What E-0 says; settings that differ from it do not change it. */
	readonly opening: Entry<'log.opened'>;
	/** True when this call wrote E-0. */
	readonly fresh: boolean;
	/** Signs the head and closes the file. */
	readonly close: () => void;
}

const writeOpening = (store: Store, key: LogKey, options: LogOptions): void => {
	const publicKey = Buffer.concat([Buffer.of(1), key.publicKey]).toString('base64');
	const { demo, address, institution } = options;
	store.write((tx) =>
		record(
			{ log: store },
			tx,
			system('start'),
			{ rule: 'log.open' },
			{
				type: 'log.opened',
				subjects: ['register'],
				payload: { demo, publicKey, address, institution }
			}
		)
	);
};

/** The text of E-0, once the log has one. */
const openingOf = (from: Handle): string | undefined =>
	from.first<{ body: string }>(entryAt(from.q, 0))?.body;

/** Tables, gates, then what the file holds: it is looked at before anything is written to it. */
const prepare = async (sqlite: Sqlite.Database): Promise<void> => {
	await migrate(sqlite);
	raiseGates(sqlite);
	const from = handle(sqlite);
	const opening = openingOf(from);
	if (opening !== undefined) checkAtStart(from, verifierOfLog(opening));
	else if (logHead(from).size > 0) throw new StartFault(65, 'The register is damaged: E-0 is missing.');
};

/**
 * Opens a register's file: settings, tables, gates, the log; a new register gets its key and E-0.
 * @throws StartFault 65 for a damaged file, 70 when a setting does not take, 76 for a newer file, 78 when the key is not
 * the one E-0 names.
 */
export const openLog = async (options: LogOptions): Promise<OpenedLog> => {
	const { file, keyFile, projectors, now } = options;
	const sqlite = openWriter(file);
	try {
		await prepare(sqlite);
		let settled: (types: readonly EventType[]) => void = () => undefined;
		const store = openStore(sqlite, projectors, now, (types) => settled(types));
		const fresh = store.frontier().size === 0;
		const key = fresh && !existsSync(keyFile) ? makeKey(keyFile) : readKey(keyFile);
		if (fresh) writeOpening(store, key, options);
		const reader = openReader(file);
		const read = handle(reader);
		const opening = openingOf(read)!;
		const verifier = verifierOfLog(opening);
		if (!verifier.publicKey.equals(key.publicKey))
			throw new StartFault(78, `The log key ${keyFile} is not the one that E-0 names`);
		const signCheckpoint: Log['signCheckpoint'] = () => signHead(store, verifier, key, now);
		const schedule = scheduleCheckpoints(signCheckpoint);
		settled = schedule.settled;
		if (fresh) signCheckpoint();
		const { frontier, append, write } = store;
		return Object.freeze({
			read,
			write,
			log: Object.freeze({ origin: verifier.name, verifier, frontier, append, signCheckpoint }),
			blobs: openBlobs(read),
			opening: JSON.parse(opening) as Entry<'log.opened'>,
			fresh,
			close: () => {
				schedule.stop();
				try {
					signCheckpoint();
				} finally {
					reader.close();
					sqlite.close();
				}
			}
		});
	} catch (cause) {
		sqlite.close();
		throw cause;
	}
};
