import { existsSync } from 'node:fs';
import { resolve } from 'node:path';
import { StartFault } from './start-fault';

/** Settings, read once at start from the environment (see README). */
export interface Config {
	/** Folder of the register: keelbook.db and what belongs to it. */
	readonly data: string;
	/** Exact origin people reach the register at, for example https://keelbook.bank.example. */
	readonly origin: string;
	readonly institution: string;
	/** A demo register offers seats; only on a loopback origin. */
	readonly demo: boolean;
	/** IANA zone in which due dates are calendar dates. */
	readonly zone: string;
	/** PEM file of the log's signing key, outside the data folder and its backups. */
	readonly logKeyFile: string;
}

const known = new Set([
	'KEELBOOK_DATA',
	'KEELBOOK_ORIGIN',
	'KEELBOOK_INSTITUTION',
	'KEELBOOK_ZONE',
	'KEELBOOK_LOG_KEY_FILE'
]);

const wrong = (sentence: string): StartFault => new StartFault(78, sentence);

const loopback = new Set(['localhost', '127.0.0.1', '[::1]']);

/** Whether the origin is this machine's own: only there may a register speak plain http or offer demo seats. */
export const isLoopback = (origin: string): boolean => loopback.has(new URL(origin).hostname);

const originOf = (text: string): string => {
	let url: URL;
	try {
		url = new URL(text);
	} catch {
		throw wrong(`KEELBOOK_ORIGIN is not an address: "${text}".`);
	}
	if (url.origin !== text) throw wrong(`KEELBOOK_ORIGIN must be an origin only, such as ${url.origin}.`);
	if (url.protocol !== 'https:' && !(url.protocol === 'http:' && isLoopback(text)))
		throw wrong('KEELBOOK_ORIGIN must start with https:// (http:// is for this machine only).');
	return text;
};

const zoneOf = (zone: string): string => {
	try {
		new Intl.DateTimeFormat('en', { timeZone: zone });
	} catch {
		throw wrong(`KEELBOOK_ZONE is no time zone: "${zone}".`);
	}
	return zone;
};

/** Reads the settings; a wrong one stops the start with a sentence (exit code 78). */
export const readConfig = (env: Readonly<Record<string, string | undefined>>): Config => {
	const unknown = Object.keys(env).find((name) => name.startsWith('KEELBOOK_') && !known.has(name));
	if (unknown) throw wrong(`${unknown} is no setting of Keelbook; the README lists them.`);
	const demo = env['KEELBOOK_DATA'] === undefined;
	const data = resolve(env['KEELBOOK_DATA'] ?? 'data/demo');
	const origin = originOf(env['KEELBOOK_ORIGIN'] ?? 'http://localhost:4173');
	if (demo && !isLoopback(origin))
		throw wrong('Set KEELBOOK_DATA: the demo register is offered on this machine only.');
	const logKeyFile = resolve(env['KEELBOOK_LOG_KEY_FILE'] ?? `${data}-log-key.pem`);
	if (logKeyFile.startsWith(`${data}/`))
		throw wrong('KEELBOOK_LOG_KEY_FILE must lie outside the data folder, or a backup would carry the key.');
	if (existsSync(data) === false && existsSync(logKeyFile))
		throw new StartFault(
			66,
			`The register in ${data} is missing, but its log key exists; restore the register.`
		);
	return Object.freeze({
		data,
		origin,
		institution: env['KEELBOOK_INSTITUTION'] ?? (demo ? 'Halden Sound Bank (invented)' : 'This institution'),
		demo,
		zone: zoneOf(env['KEELBOOK_ZONE'] ?? 'UTC'),
		logKeyFile
	});
};
