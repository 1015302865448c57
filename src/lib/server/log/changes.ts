import type { Handle } from '../db/handle';
import { changesIn } from './log.queries';

/** A projected row an entry changed; a side is absent where there was or is no row. */
export interface RowChange {
	readonly table: string;
	/** The row's key, its parts apart by a blank. */
	readonly row: string;
	/** Only the columns that differ, where the row was there before and after. */
	readonly before?: Readonly<Record<string, unknown>>;
	readonly after?: Readonly<Record<string, unknown>>;
}

interface Stored {
	readonly tbl: string;
	readonly row: string;
	readonly before: string | null;
	readonly after: string | null;
}

/** A column that holds JSON, as the value it says. */
const opened = (value: unknown): unknown => {
	if (typeof value !== 'string' || !/^[[{]/.test(value)) return value;
	try {
		return JSON.parse(value) as unknown;
	} catch {
		return value;
	}
};

const side = (text: string | null): Record<string, unknown> | undefined =>
	text === null
		? undefined
		: Object.fromEntries(
				Object.entries(JSON.parse(text) as Record<string, unknown>).map(([name, value]) => [
					name,
					opened(value)
				])
			);

/** The same row changed several times by one entry (removed and written again, say) is one change. */
const merged = (changes: readonly RowChange[]): RowChange[] => {
	const byRow = new Map<string, RowChange>();
	for (const change of changes) {
		const key = `${change.table}\n${change.row}`;
		const first = byRow.get(key);
		const before = first ? first.before && { ...change.before, ...first.before } : change.before;
		const after = change.after && { ...first?.after, ...change.after };
		byRow.set(key, {
			table: change.table,
			row: change.row,
			...(before && { before }),
			...(after && { after })
		});
	}
	return [...byRow.values()].filter(({ before, after }) => JSON.stringify(before) !== JSON.stringify(after));
};

/** What an entry changed in the projected tables, in the order of its projection. */
export const changesOf = (from: Handle, seq: number): readonly RowChange[] =>
	merged(
		from.all<Stored>(changesIn(from.q, seq)).map(({ tbl, row, before, after }) => {
			const [was, is] = [side(before), side(after)];
			return { table: tbl, row, ...(was && { before: was }), ...(is && { after: is }) };
		})
	);
