/** The log's own tables. */
export interface LogSchema {
	entry: { seq: number; at: string; type: string; actor: string; body: string };
	entry_subject: { ref: string; n: number; seq: number };
	node: { pos: number; hash: Buffer };
	checkpoint: { size: number; root: Buffer; note: string; at: string };
	blob: { sha256: string; size: number; bytes: Buffer };
	/** What an entry changed: JSON objects of the columns, null where there was or is no row. */
	entry_change: {
		entry: number;
		n: number;
		tbl: string;
		row: string;
		before: string | null;
		after: string | null;
	};
	log_head: { one: number; size: number; at: string };
	current_entry: { seq: number };
	never: { seq: number };
}
