import { fork, type ChildProcess } from 'node:child_process';
import { once } from 'node:events';
import { mkdtempSync, rmSync } from 'node:fs';
import { createServer } from 'node:net';
import { tmpdir } from 'node:os';
import { dirname, join, resolve } from 'node:path';

const root = resolve(import.meta.dirname, '../..');

/** A port nobody listens on at this moment. */
export const freePort = async (): Promise<number> => {
	const probe = createServer().listen(0, '127.0.0.1');
	await once(probe, 'listening');
	const address = probe.address();
	if (address === null || typeof address === 'string') throw new Error('no port');
	probe.close();
	await once(probe, 'close');
	return address.port;
};

export interface Server {
	readonly origin: string;
	/** The register's folder. */
	readonly data: string;
	/** What the server has written to standard output and error so far. */
	readonly output: () => string;
	/** Sets the server's clock. */
	readonly moveClock: (at: string) => Promise<void>;
	/** Ends the process; the folder stays until `remove`. */
	readonly stop: () => Promise<void>;
	readonly remove: () => void;
}

const ended = (child: ChildProcess): Promise<unknown> =>
	child.exitCode === null && child.signalCode === null ? once(child, 'exit') : Promise.resolve();

export interface Starting {
	readonly demo?: boolean;
	/** A register that exists; its folder is removed with the server's. */
	readonly data?: string;
	readonly port?: number;
}

/**
 * Starts the built server: on the register of `data`; `demo` in an empty working folder of its own; else on a fresh
 * register whose first enrolment links stand in `output()`.
 */
export const startServer = async (how: Starting = {}): Promise<Server> => {
	const { demo = false } = how;
	const folder = how.data === undefined ? mkdtempSync(join(tmpdir(), 'keelbook-')) : dirname(how.data);
	const port = how.port ?? (await freePort());
	const origin = `http://localhost:${port}`;
	const data = how.data ?? join(folder, demo ? 'data/demo' : 'register');
	const env = Object.fromEntries(
		Object.entries(process.env).filter(([name]) => !/^(KEELBOOK_|VITEST)/.test(name))
	);
	const child = fork(resolve(root, 'tests/support/start-with-clock.js'), [], {
		cwd: folder,
		silent: true,
		execArgv: [],
		env: {
			...env,
			NODE_ENV: 'production',
			PORT: String(port),
			KEELBOOK_ORIGIN: origin,
			...(demo ? {} : { KEELBOOK_DATA: data })
		}
	});
	let output = '';
	const listening = new Promise<void>((done, failed) => {
		const hear = (chunk: Buffer): void => {
			output += chunk.toString();
			if (output.includes('Keelbook answers at')) done();
		};
		child.stdout?.on('data', hear);
		child.stderr?.on('data', hear);
		child.once('exit', (code) => failed(new Error(`the server ended with ${code}:\n${output}`)));
	});
	await listening;
	return {
		origin,
		data,
		output: () => output,
		moveClock: async (at) => {
			child.send({ at });
			await once(child, 'message');
		},
		stop: async () => {
			child.kill('SIGTERM');
			await ended(child);
		},
		remove: () => rmSync(folder, { recursive: true, force: true })
	};
};
