import type { Envelope } from '$lib/chain/entry';
import { parseVerifier, verifierText, type Verifier } from '$lib/chain/verifier-key';
import type Sqlite from 'better-sqlite3';
import type { Projectors } from '../context';
import { handle } from '../db/handle';
import { openEvidence } from './evidence';
import { verifierOfLog } from './opening';
import { entryTexts, replay, ReplayStopped } from './replay';
import { blobsNamed, checkBlobs } from './verify/blobs';
import { checkpointChecker } from './verify/checkpoints';
import { compareSchemas, compareTables } from './verify/compare';
import { entryChecker } from './verify/entries';
import { Findings, type Report } from './verify/report';
import { openSource, type Source } from './verify/source';
import { treeChecker } from './verify/tree';

export interface VerifyOptions {
	/** The register's database; it is only read. */
	readonly file: string;
	/** Verifier key noted outside the register; without it nobody vouches for the key that E-0 names. */
	readonly key?: string;
	readonly projectors: Projectors;
}

interface Pass {
	readonly size: number;
	readonly root: Buffer;
	readonly checkpoints: number;
	/** Every entry was there and could be read, so that replay can be tried. */
	readonly whole: boolean;
	readonly opening?: string;
	readonly seats: number;
}

/** One walk over the entries: bytes, order, subjects, tree, checkpoints' roots, blobs named. */
const walk = (
	source: Source,
	findings: Findings,
	verifier: (opening: string) => Verifier | undefined
): Pass => {
	const entries = entryChecker(source, findings);
	const tree = treeChecker(source, findings);
	const checkpoints = checkpointChecker(source, findings);
	let whole = true;
	let opening: string | undefined;
	let seats = 0;
	for (const row of source.entries()) {
		const seq = tree.size();
		if (row.seq !== seq) {
			findings.fault('entry', `E-${seq}`, `seq: it is missing; E-${row.seq} follows E-${seq - 1}`);
			findings.notChecked.push(
				`Entries from E-${seq} on, their nodes and their subjects: an entry is missing.`
			);
			whole = false;
			break;
		}
		const entry = entries.check(row);
		whole &&= entry !== undefined;
		if (seq === 0) opening = row.bytes.toString();
		if (entry?.auth.means === 'seat') seats++;
		if (entry) checkNamed(entry, source, findings);
		tree.leaf(row.bytes);
		checkpoints.reached(seq + 1, tree.root);
	}
	const key = opening === undefined ? undefined : verifier(opening);
	if (key) checkpoints.signatures(key);
	if (whole) {
		tree.end();
		entries.end();
		checkEnds(source, findings, tree.size(), entries.last());
	}
	checkpoints.end(tree.size());
	return {
		size: tree.size(),
		root: tree.root(),
		checkpoints: checkpoints.count,
		whole,
		seats,
		...(opening && { opening })
	};
};

const checkNamed = (entry: Envelope, source: Source, findings: Findings): void => {
	for (const digest of blobsNamed(entry))
		if (source.blobExists.get(digest) === undefined)
			findings.fault('blob', digest, `is named by E-${entry.seq} and missing`);
};

const checkEnds = (source: Source, findings: Findings, size: number, at: string): void => {
	if (source.gates() > 0) findings.fault('gate', 'current_entry', 'an entry was left open');
	const heads = source.heads();
	const [head] = heads;
	if (heads.length !== 1 || head?.size !== size || head.at !== at)
		findings.fault(
			'head',
			'log_head',
			`says ${head?.size} entries up to ${head?.at}; there are ${size} up to ${at}`
		);
};

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

/**
 * Verifies a register's file from its bytes alone: the file, every entry, every node, every signed checkpoint, every blob,
 * and every projected table against a replay of the log.
 * @throws NoRegister when there is none at this place; BadVerifierKey for a malformed key.
 */
export const verifyRegister = async ({ file, key, projectors }: VerifyOptions): Promise<Report> => {
	if (key !== undefined) parseVerifier(key);
	const findings = new Findings();
	const sqlite = openEvidence(file);
	try {
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
			root: pass.root.toString('hex'),
			faults: findings.faults(),
			differences: findings.differences,
			notChecked: findings.notChecked,
			remarks: findings.remarks,
			unvouched: key === undefined
		};
	} finally {
		sqlite.close();
	}
};

const namedBy = (opening: string): Verifier | undefined => {
	try {
		return verifierOfLog(opening);
	} catch {
		return undefined;
	}
};
