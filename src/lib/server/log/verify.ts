import { parseVerifier, verifierText, type Verifier } from '$lib/chain/verifier-key';
import Sqlite from 'better-sqlite3';
import type { Projectors } from '../context';
import { handle } from '../db/handle';
import { openEvidence } from './evidence';
import { verifierOfLog } from './opening';
import { entryTexts, replay, ReplayStopped } from './replay';
import { checkBlobs } from './verify/blobs';
import { compareSchemas, compareTables } from './verify/compare';
import { Findings, type Report } from './verify/report';
import { openSource } from './verify/source';
import { walk } from './verify/walk';

export interface VerifyOptions {
	/** The register's database; it is only read. */
	readonly file: string;
	/** Verifier key noted outside the register; without it nobody vouches for the key that E-0 names. */
	readonly key?: string;
	readonly projectors: Projectors;
}

/** The key of the checkpoints: the one E-0 names, which must be the one given. */
const keyFor =
	(findings: Findings, given: string | undefined) =>
	(opening: string): Verifier | undefined => {
		let own: Verifier;
		try {
			own = verifierOfLog(opening);
		} catch (cause) {
			findings.fault(
				'entry',
				'E-0',
				`names no usable key: ${cause instanceof Error ? cause.message : String(cause)}`
			);
			return undefined;
		}
		if (given === undefined || given === verifierText(own)) return own;
		findings.fault('checkpoint', 'key', `E-0 names ${verifierText(own)}, which is not the key given`);
		return parseVerifier(given);
	};

const checkFile = (sqlite: Sqlite.Database, findings: Findings): void => {
	const [first] = sqlite.pragma('integrity_check(1)') as { integrity_check: string }[];
	if (first?.integrity_check !== 'ok')
		findings.fault('file', 'keelbook.db', `integrity: ${first?.integrity_check}`);
};

const checkTables = async (
	sqlite: Sqlite.Database,
	projectors: Projectors,
	findings: Findings,
	whole: boolean
): Promise<{ tables: number; rows: number }> => {
	try {
		const again = await replay(whole ? entryTexts(handle(sqlite)) : [], projectors);
		try {
			compareSchemas(sqlite, again.sqlite, findings);
			if (whole) return compareTables(sqlite, again.sqlite, findings);
			findings.notChecked.push(
				'Projected tables: the log cannot be replayed while an entry is missing or unreadable.'
			);
		} finally {
			again.close();
		}
	} catch (cause) {
		if (!(cause instanceof ReplayStopped)) throw cause;
		findings.fault('replay', `E-${cause.seq}`, cause.message.replace(/^E-\d+: /, ''));
		findings.notChecked.push(`Projected tables: replay stopped at E-${cause.seq}.`);
	}
	return { tables: 0, rows: 0 };
};

type Seen = Omit<Report, 'faults' | 'differences' | 'notChecked' | 'remarks' | 'unvouched'>;

const nothing: Seen = { entries: 0, nodes: 0, checkpoints: 0, blobs: 0, tables: 0, rows: 0 };

/** Looks at every part of an open file; what was seen of it. */
const examine = async (
	sqlite: Sqlite.Database,
	{ key, projectors }: VerifyOptions,
	findings: Findings
): Promise<Seen> => {
	// One snapshot for all parts: the register may be written to meanwhile.
	sqlite.exec('begin');
	checkFile(sqlite, findings);
	const source = openSource(sqlite);
	const pass = walk(source, findings, keyFor(findings, key));
	const blobs = checkBlobs(source, findings);
	const compared = await checkTables(sqlite, projectors, findings, pass.whole);
	if (pass.size === 0) findings.fault('entry', 'E-0', 'seq: it is missing; the log is empty');
	if (pass.seats > 0)
		findings.remarks.push(`${pass.seats} entries were made from demo seats, whose keys the server holds.`);
	const own = pass.opening === undefined ? undefined : namedBy(pass.opening);
	return {
		...(own && { origin: own.name, verifierKey: verifierText(own) }),
		entries: pass.size,
		nodes: source.nodeCount(),
		checkpoints: pass.checkpoints,
		blobs,
		...compared,
		root: pass.root.toString('hex')
	};
};

const namedBy = (opening: string): Verifier | undefined => {
	try {
		return verifierOfLog(opening);
	} catch {
		return undefined;
	}
};

/**
 * Verifies a register's file from its bytes alone: the file, every entry, every node, every signed checkpoint, every blob,
 * and every projected table against a replay of the log.
 * @throws NoRegister when there is none at this place; BadVerifierKey for a malformed key.
 */
export const verifyRegister = async (options: VerifyOptions): Promise<Report> => {
	if (options.key !== undefined) parseVerifier(options.key);
	const findings = new Findings();
	const sqlite = openEvidence(options.file);
	let seen = nothing;
	try {
		seen = await examine(sqlite, options, findings);
	} catch (cause) {
		if (!(cause instanceof Sqlite.SqliteError)) throw cause;
		findings.fault('file', 'keelbook.db', `cannot be read: ${cause.message}`);
		findings.notChecked.push('What lies beyond the page that cannot be read.');
	} finally {
		sqlite.close();
	}
	const { differences, notChecked, remarks } = findings;
	const unvouched = options.key === undefined;
	return { ...seen, faults: findings.faults(), differences, notChecked, remarks, unvouched };
};
