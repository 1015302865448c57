import type Sqlite from 'better-sqlite3';
import { BadEntry, entryText } from '$lib/chain/entry';
import { emptyFrontier, frontierOf, type Frontier } from '$lib/chain/merkle';
import type { Entry, Subject } from '$lib/domain/entry';
import type { EventType } from '$lib/domain/events';
import { Conflict, Invalid } from '$lib/domain/faults';
import type { Projectors } from '../context';
import { handle, type Handle, type Tx } from '../db/handle';
import { appendText } from './append';
import type { Draft } from './log';
import { hashAt, logHead } from './log.queries';

/** How far the clock may stand before the last entry and still be bent to it, in milliseconds. */
const bendable = 120_000;

export interface Store {
	/** Runs the work in BEGIN IMMEDIATE … COMMIT; a throw rolls back. Never nested. */
	readonly write: <T>(work: (tx: Tx) => T) => T;
	/** The committed right edge of the tree. */
	readonly frontier: () => Frontier;
	readonly append: <T extends EventType>(tx: Tx, draft: Draft<T>) => Entry<T>;
}

/** The frontier of the tree as the node rows say it. */
export const storedFrontier = (from: Handle): Frontier => {
	const size = from.first<{ size: number }>(logHead(from.q))?.size ?? 0;
	if (size === 0) return emptyFrontier;
	return frontierOf(size, (pos) => {
		const row = from.first<{ hash: Buffer }>(hashAt(from.q, pos));
		if (!row) throw new Error(`The tree lacks node ${pos}`);
		return row.hash;
	});
};

/** The time of the next entry: never before the last one's; `clock` says when it had to be bent. */
const timeOf = (now: Date, last: string | undefined): Pick<Entry, 'at' | 'clock'> => {
	const raw = now.toISOString();
	if (last === undefined || raw >= last) return { at: raw };
	if (Date.parse(last) - now.getTime() > bendable)
		throw new Conflict(
			'The server clock stands before the last entry; nothing can be written until it is put right.'
		);
	return { at: last, clock: { raw, reason: 'behind' } };
};

/** What every append asks, prepared once: building these statements anew would cost more than running them. */
const openReadings = (sqlite: Sqlite.Database) => {
	const last = sqlite.prepare<[], { at: string }>('select at from entry order by seq desc limit 1');
	const lastOf = sqlite.prepare<[string], { n: number; seq: number }>(
		'select n, seq from entry_subject where ref = ? order by n desc limit 1'
	);
	return {
		lastAt: (): string | undefined => last.get()?.at,
		counted: (refs: readonly string[]): Subject[] =>
			[...new Set(refs)].sort().map((ref) => {
				const before = lastOf.get(ref);
				return before ? { n: before.n + 1, prev: before.seq, ref } : { n: 1, prev: null, ref };
			})
	};
};

/**
 * The one writer of a register.
 * @param settled called after each COMMIT with the types of the entries it made durable.
 */
export const openStore = (
	sqlite: Sqlite.Database,
	projectors: Projectors,
	now: () => Date,
	settled: (types: readonly EventType[]) => void
): Store => {
	const tx = handle(sqlite);
	const readings = openReadings(sqlite);
	const [begin, commit, rollback] = ['begin immediate', 'commit', 'rollback'].map((sql) =>
		sqlite.prepare(sql)
	);
	let committed = storedFrontier(tx);
	let pending: Frontier | undefined;
	let types: EventType[] = [];

	const write = <T>(work: (tx: Tx) => T): T => {
		if (pending) throw new Error('A transaction is running: write is never nested');
		begin!.run();
		pending = committed;
		types = [];
		let result: T;
		try {
			result = work(tx);
			if (result instanceof Promise) throw new Error('The work of a transaction must be synchronous');
			commit!.run();
			committed = pending;
		} catch (cause) {
			if (sqlite.inTransaction) rollback!.run();
			committed = storedFrontier(tx);
			throw cause;
		} finally {
			pending = undefined;
		}
		if (types.length > 0) settled(types);
		return result;
	};

	const append = <T extends EventType>(within: Tx, { subjects, ...draft }: Draft<T>): Entry<T> => {
		if (within !== tx || !pending) throw new Error('Entries are appended inside ctx.write only');
		const seq = pending.size;
		const text = textOf({
			seq,
			...timeOf(now(), readings.lastAt()),
			subjects: readings.counted(subjects),
			...draft
		});
		const entry = JSON.parse(text) as Entry<T>;
		pending = appendText(tx, pending, text, entry as Entry, projectors);
		types.push(entry.type);
		return entry;
	};
	return Object.freeze({ write, frontier: () => committed, append });
};

const textOf = (entry: Entry): string => {
	try {
		return entryText(entry);
	} catch (cause) {
		if (cause instanceof BadEntry) throw new Invalid([cause.fault]);
		throw cause;
	}
};
