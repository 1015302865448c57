import { openCheckpoint } from '$lib/chain/checkpoint';
import { BadNote } from '$lib/chain/note';
import type { Verifier } from '$lib/chain/verifier-key';
import type { Findings } from './report';
import type { Source } from './source';

type Row = ReturnType<Source['checkpoints']>[number];

const noteFault = ({ size, root, note }: Row, verifier: Verifier): string | undefined => {
	try {
		const head = openCheckpoint(note, verifier);
		if (head.size !== size) return `note: it signs size ${head.size}`;
		return head.root.equals(root) ? undefined : 'note: it signs another root than the row holds';
	} catch (cause) {
		if (cause instanceof BadNote) return `note: ${cause.message}`;
		throw cause;
	}
};

/** Judges every signed head: its signature once the key is known, its root when the entries of its size have been seen. */
export const checkpointChecker = (source: Source, findings: Findings) => {
	const rows = source.checkpoints();
	let next = 0;
	return {
		count: rows.length,
		/** To be called after each entry with the root computed from all entries so far. */
		reached(size: number, root: () => Buffer): void {
			const row = rows[next];
			if (row?.size !== size) return;
			next++;
			if (!row.root.equals(root()))
				findings.fault(
					'checkpoint',
					`checkpoint ${size}`,
					`root: the entries E-0 to E-${size - 1} are not those it was signed over`
				);
		},
		signatures(verifier: Verifier): void {
			for (const row of rows) {
				const words = noteFault(row, verifier);
				if (words) findings.fault('checkpoint', `checkpoint ${row.size}`, words);
			}
		},
		end(size: number): void {
			const beyond = rows[next];
			if (beyond)
				findings.fault(
					'checkpoint',
					`checkpoint ${beyond.size}`,
					`size: it was signed over ${beyond.size} entries, ${size} are here`
				);
			const last = rows.at(-1)?.size ?? 0;
			if (last < size)
				findings.remarks.push(
					last === 0
						? 'No checkpoint has been signed.'
						: `E-${last} to E-${size - 1} are not yet under a signed checkpoint.`
				);
		}
	};
};
