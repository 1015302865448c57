import type { PersonId } from '$lib/domain/actor';
import type { Entry } from '$lib/domain/entry';
import type { EventType } from '$lib/domain/events';
import type { ModelFacts } from '$lib/domain/permissions';
import type { Policy } from '$lib/domain/policy';
import type { Config } from './config';
import type { Handle, Tx } from './db/handle';
import type { Log } from './log/log';
import type { Pool } from './runs/pool';

/** Changes the projected rows of one event type; a pure function of the entry and of rows projected before it. */
export type Projector<T extends EventType> = (tx: Tx, entry: Entry<T>) => void;
export type Projectors = { readonly [T in EventType]?: Projector<T> };

/** Content-addressed bytes: datasets, run results, documents. */
export interface Blobs {
	/** Stores the bytes in the transaction and returns `sha256:<64 hex>`; the same bytes are stored once. */
	put(tx: Tx, bytes: Uint8Array): string;
	/** The bytes, verified against their digest; undefined where there are none. */
	get(digest: string): Buffer | undefined;
}

/** Names of people, from the mutable directory: never joined in SQL, so that views of the past have none. */
export interface People {
	names(ids: Iterable<PersonId | 'system' | 'cli'>): ReadonlyMap<string, string>;
}

/** What authorisation must know of a subject; provided by the room that owns it. */
export interface Facts {
	model(handle: Handle, ref: string): ModelFacts | undefined;
	/** A person's relations to models, in force now. */
	parties(
		handle: Handle,
		person: PersonId
	): readonly { readonly model: string; readonly party: 'owner' | 'developer' | 'validator' }[];
}

/** Everything a verb needs, assembled once in boot.ts. Rooms import these types only. */
export interface Ctx {
	readonly config: Config;
	readonly now: () => Date;
	/** The live register on a read-only connection. */
	readonly read: Handle;
	/** Runs the work in BEGIN IMMEDIATE … COMMIT on the one writer; a throw rolls all of it back. Never nested. */
	readonly write: <T>(work: (tx: Tx) => T) => T;
	readonly log: Log;
	readonly projectors: Projectors;
	readonly facts: Facts;
	readonly blobs: Blobs;
	readonly people: People;
	/** Released policies by their digest. */
	readonly policies: ReadonlyMap<string, Policy>;
	readonly pool: Pool;
}
