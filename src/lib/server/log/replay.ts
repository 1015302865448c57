import { emptyFrontier, type Frontier } from '$lib/chain/merkle';
import type { Entry } from '$lib/domain/entry';
import type Sqlite from 'better-sqlite3';
import type { Projectors } from '../context';
import { raiseGates } from '../db/gates';
import { handle, type Handle, type Tx } from '../db/handle';
import { migrate } from '../db/migrate';
import { openMemory } from '../db/open';
import { appendText } from './append';
import { bodiesFrom } from './log.queries';
import { payloadSchema } from './record';

/** Replay cannot go on: the entry is unknown to this release, or its projection fails. */
export class ReplayStopped extends Error {
	override readonly name = 'ReplayStopped';
	constructor(
		readonly seq: number,
		words: string,
		options?: ErrorOptions
	) {
		super(`E-${seq}: ${words}`, options);
	}
}

/** A register rebuilt from its entries, in memory. */
export interface Replayed {
	readonly handle: Handle;
	readonly sqlite: Sqlite.Database;
	readonly frontier: Frontier;
	readonly close: () => void;
}

/** Entries read in one go; also the size of a transaction. */
const batch = 1000;

/** The texts of the entries below `size`, in order. */
export const entryTexts = function* (from: Handle, size = Infinity): Generator<string> {
	for (let next = 0; next < size;) {
		const rows = from.all<{ seq: number; body: string }>(
			bodiesFrom(from.q, next, Math.min(batch, size - next))
		);
		for (const { body } of rows) yield body;
		if (rows.length === 0) return;
		next = rows.at(-1)!.seq + 1;
	}
};

const step = (tx: Tx, frontier: Frontier, text: string, projectors: Projectors): Frontier => {
	const { size } = frontier;
	try {
		const entry = JSON.parse(text) as Entry;
		const { type, v } = entry;
		if (!payloadSchema(type, v)) throw new ReplayStopped(size, `unknown event ${type} version ${v}`);
		return appendText(tx, frontier, text, entry, projectors);
	} catch (cause) {
		if (cause instanceof ReplayStopped) throw cause;
		throw new ReplayStopped(size, cause instanceof Error ? cause.message : String(cause), { cause });
	}
};

/**
 * Appends the texts verbatim to an empty register in memory and projects them by the same projectors: the register as it
 * was after the last of them. @throws ReplayStopped
 */
export const replay = async (texts: Iterable<string>, projectors: Projectors): Promise<Replayed> => {
	const sqlite = openMemory();
	try {
		await migrate(sqlite);
		raiseGates(sqlite);
		const tx = handle(sqlite);
		let frontier = emptyFrontier;
		sqlite.exec('begin immediate');
		for (const text of texts) {
			frontier = step(tx, frontier, text, projectors);
			if (frontier.size % batch === 0) sqlite.exec('commit; begin immediate');
		}
		sqlite.exec('commit');
		return Object.freeze({ handle: tx, sqlite, frontier, close: () => void sqlite.close() });
	} catch (cause) {
		sqlite.close();
		throw cause;
	}
};
