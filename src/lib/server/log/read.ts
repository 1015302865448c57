import type { Entry } from '$lib/domain/entry';
import { events } from '$lib/domain/events';
import { Absent } from '$lib/domain/faults';
import type { Handle } from '../db/handle';
import { entriesBetween, entryAt, firstFrom, leastActorAfter, logHead } from './log.queries';

/** Which entries: all conditions hold together. */
export interface EntryFilter {
	readonly type?: string;
	readonly subject?: string;
	readonly actor?: string;
	/** Only folios above and below these. */
	readonly after?: number;
	readonly before?: number;
	/** Only entries about one of these references, when a person may see no others. */
	readonly within?: readonly string[];
}

/** Rows of one page, and whether there are more beyond it in the direction read. */
export interface EntryPage {
	readonly entries: readonly Entry[];
	readonly more: boolean;
}

/**
 * A page of entries by keyset: the folio is the key, so that any depth costs the same.
 * @param order `newest` reads backwards from `before`, `oldest` forwards from `after`.
 */
export const listEntries = (
	from: Handle,
	filter: EntryFilter,
	order: 'newest' | 'oldest',
	count: number
): EntryPage => {
	const rows = from.all<{ body: string }>(entriesBetween(from.q, filter, order, count + 1));
	return {
		entries: rows.slice(0, count).map(({ body }) => JSON.parse(body) as Entry),
		more: rows.length > count
	};
};

/** The canonical text of an entry. @throws Absent */
export const textOfEntry = (from: Handle, seq: number): string => {
	const row = from.first<{ body: string }>(entryAt(from.q, seq));
	if (!row) throw new Absent(`There is no entry E-${seq}.`);
	return row.body;
};

/** The folio of the first entry at or after an instant; the size of the log when there is none. Times never fall. */
export const folioFrom = (from: Handle, instant: string): number => {
	let low = 0;
	let high = from.first<{ size: number }>(logHead(from.q))!.size;
	while (low < high) {
		const middle = Math.floor((low + high) / 2);
		if (from.first<{ at: string }>(firstFrom(from.q, middle))!.at < instant) low = middle + 1;
		else high = middle;
	}
	return low;
};

/** Everybody who ever wrote an entry. */
export const actorsOf = (from: Handle): string[] => {
	const actors: string[] = [];
	// One step of the index an actor, where `distinct` would walk every entry.
	for (let last = ''; ;) {
		const next = from.first<{ actor: string }>(leastActorAfter(from.q, last));
		if (!next) return actors;
		actors.push((last = next.actor));
	}
};

/** Every event type there is, for choosing. */
export const eventTypes: readonly string[] = Object.freeze(Object.keys(events).sort());
