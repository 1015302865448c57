import { openCheckpoint } from './checkpoint';
import { largestSize, leafHash } from './merkle';
import { BadNote } from './note';
import { verifyInclusion } from './proof-verify';
import { strictBase64, type Verifier } from './verifier-key';

const inclusionHeader = 'c2sp.org/tlog-proof@v1';
const consistencyHeader = 'keelbook-consistency v1';

const lines = (hashes: readonly Uint8Array[]): string =>
	hashes.map((hash) => `${Buffer.from(hash).toString('base64')}\n`).join('');

/** An inclusion proof with the checkpoint it leads to (C2SP tlog-proof v1). */
export const inclusionText = (index: number, proof: readonly Uint8Array[], note: string): string =>
	`${inclusionHeader}\nindex ${index}\n${lines(proof)}\n${note}`;

/** A consistency proof from an older size to the checkpoint below it. */
export const consistencyText = (
	from: number,
	to: number,
	proof: readonly Uint8Array[],
	note: string
): string => `${consistencyHeader}\nfrom ${from}\nto ${to}\n${lines(proof)}\n${note}`;

/** At most 63 hashes lead from a leaf to a root. */
const mostHashes = 63;

const hashesOf = (text: string): Buffer[] => {
	const hashes = text === '' ? [] : text.split('\n').map(strictBase64);
	if (hashes.length > mostHashes || !hashes.every((hash): hash is Buffer => hash?.length === 32))
		throw new BadNote('a hash of the proof is malformed');
	return hashes as Buffer[];
};

export interface InclusionProof {
	readonly index: number;
	readonly proof: readonly Buffer[];
	/** The signed checkpoint, not judged yet. */
	readonly note: string;
}

/** Takes an inclusion proof apart. @throws BadNote */
export const parseInclusion = (text: string): InclusionProof => {
	const split = text.indexOf('\n\n');
	const [header, ...rest] = split < 0 ? [] : text.slice(0, split).split('\n');
	if (header !== inclusionHeader) throw new BadNote('not an inclusion proof');
	// Opaque data of the application, before the index; we write none and judge none.
	const [first, ...hashes] = rest[0]?.startsWith('extra ') ? rest.slice(1) : rest;
	const index = /^index (0|[1-9][0-9]{0,15})$/.exec(first ?? '')?.[1];
	if (index === undefined || Number(index) >= largestSize)
		throw new BadNote('the index of the proof is malformed');
	return { index: Number(index), proof: hashesOf(hashes.join('\n')), note: text.slice(split + 2) };
};

/**
 * Whether a proof shows that these bytes are an entry of the log of this verifier: the leaf hash comes from the bytes,
 * size and root together from the signed checkpoint. @throws BadNote for a malformed proof or a checkpoint that fails.
 */
export const provesEntry = (text: string, bytes: Uint8Array, verifier: Verifier): boolean => {
	const { index, proof, note } = parseInclusion(text);
	const { size, root } = openCheckpoint(note, verifier);
	return verifyInclusion({ index, size, root, proof, leafHash: leafHash(bytes) });
};
