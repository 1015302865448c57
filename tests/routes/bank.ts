import Sqlite from 'better-sqlite3';
import { mkdtempSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { Entry } from '$lib/domain/entry';
import { populate, type Populated } from '../support/populated';
import { freePort, startServer, type Server } from '../support/server';

/** The populated register, served by the built server. */
export interface Bank extends Populated {
	readonly server: Server;
	readonly origin: string;
	/** The first entries are those of its making; the rest is what requests wrote. */
	readonly entriesAfter: (seq: number) => readonly Entry[];
	/** Sets the server's clock to a full minute: the next one, or so many later. */
	readonly nextMinute: (minutes?: number) => Promise<void>;
	readonly close: () => Promise<void>;
}

/** Makes the register, starts the server on it. */
export const openBank = async (): Promise<Bank> => {
	const port = await freePort();
	const folder = mkdtempSync(join(tmpdir(), 'keelbook-'));
	const populated = await populate(folder, `http://localhost:${port}`);
	const server = await startServer({ data: populated.data, port });
	// Another process reads beside the server that writes.
	const database = new Sqlite(join(populated.data, 'keelbook.db'), { readonly: true });
	const after = database.prepare<[number], { body: string }>(
		'select body from entry where seq > ? order by seq'
	);
	let minute = Math.floor(Date.now() / 60_000);
	return {
		...populated,
		server,
		origin: server.origin,
		entriesAfter: (seq) => after.all(seq).map(({ body }) => JSON.parse(body) as Entry),
		nextMinute: (minutes = 1) => server.moveClock(new Date((minute += minutes) * 60_000).toISOString()),
		close: async () => {
			database.close();
			await server.stop();
			server.remove();
		}
	};
};
