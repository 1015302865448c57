import type { KeyObject } from 'node:crypto';
import { largestSize } from './merkle';
import { BadNote, openNote, signNote } from './note';
import { strictBase64, type Verifier } from './verifier-key';

/** The head of a log: its size and root, signed together. */
export interface Head {
	readonly origin: string;
	readonly size: number;
	readonly root: Buffer;
}

/** The signed text of a checkpoint (C2SP tlog-checkpoint), without extension lines. */
export const checkpointText = ({ origin, size, root }: Head): string =>
	`${origin}\n${size}\n${root.toString('base64')}\n`;

/** Reads the text of a checkpoint. @throws BadNote */
export const parseCheckpoint = (text: string): Head => {
	const [origin, size, encoded, ...rest] = text.split('\n');
	if (!origin || size === undefined || encoded === undefined || rest.join('\n') !== '')
		throw new BadNote('a checkpoint has three lines');
	if (!/^(?:0|[1-9][0-9]{0,15})$/.test(size) || Number(size) > largestSize)
		throw new BadNote('the size of the checkpoint is malformed');
	const root = strictBase64(encoded);
	if (root?.length !== 32) throw new BadNote('the root of the checkpoint is malformed');
	return { origin, size: Number(size), root };
};

/** Signs a head; the key's name is the origin. */
export const signCheckpointText = (head: Head, verifier: Verifier, key: KeyObject): string => {
	if (verifier.name !== head.origin) throw new Error('The name of the key must be the origin of the log');
	return signNote(checkpointText(head), verifier, key);
};

/** Opens a signed checkpoint: strict text, known signature, origin = the key's name. @throws BadNote */
export const openCheckpoint = (note: string, verifier: Verifier): Head => {
	const head = parseCheckpoint(openNote(note, [verifier]).text);
	if (head.origin !== verifier.name) throw new BadNote('the checkpoint is of another log');
	return head;
};
