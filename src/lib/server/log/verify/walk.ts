import type { Envelope } from '$lib/chain/entry';
import type { Verifier } from '$lib/chain/verifier-key';
import { blobsNamed } from './blobs';
import { checkpointChecker } from './checkpoints';
import { entryChecker } from './entries';
import type { Findings } from './report';
import type { Source } from './source';
import { treeChecker } from './tree';

/** What one walk over the entries found out. */
export interface Pass {
	readonly size: number;
	readonly root: Buffer;
	readonly checkpoints: number;
	/** Every entry was there and could be read, so that replay can be tried. */
	readonly whole: boolean;
	readonly opening?: string;
	readonly seats: number;
}

/** One walk over the entries: bytes, order, subjects, tree, checkpoints' roots, blobs named. */
export const walk = (
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
