import type { Frontier } from '$lib/chain/merkle';
import type { Verifier } from '$lib/chain/verifier-key';
import type { Entry } from '$lib/domain/entry';
import type { EventType } from '$lib/domain/events';
import type { Tx } from '../db/handle';

/** A signed head of the log, as stored. */
export interface Checkpoint {
	readonly size: number;
	readonly root: Buffer;
	/** C2SP signed note. */
	readonly note: string;
	readonly at: string;
}

/** What `record` hands to the log: everything but what the log itself gives (folio, time, subjects' counts). */
export type Draft<T extends EventType = EventType> = Pick<
	Entry<T>,
	'type' | 'v' | 'actor' | 'behalf' | 'payload' | 'auth' | 'request'
> & { readonly subjects: readonly string[] };

/** The append-only log of one register. */
export interface Log {
	/** Name of the log and of its key: `<host>/keelbook/<first 16 hex digits of SHA-256 of E-0>`. */
	readonly origin: string;
	/** Who signs its checkpoints, as E-0 says. */
	readonly verifier: Verifier;
	/** The committed right edge of the tree; moves only after COMMIT returned. */
	readonly frontier: () => Frontier;
	/** Appends and projects one entry in the running transaction; used by `record` alone. */
	readonly append: <T extends EventType>(tx: Tx, draft: Draft<T>) => Entry<T>;
	/** Signs the present head, unless it is signed; undefined while the log is empty. Not inside a transaction. */
	readonly signCheckpoint: () => Checkpoint | undefined;
}
