import type Sqlite from 'better-sqlite3';

/** One stored entry as raw bytes with its columns. */
export interface StoredEntry {
	readonly seq: number;
	readonly at: string;
	readonly type: string;
	readonly actor: string;
	readonly bytes: Buffer;
}

/**
 * The log's tables read raw: bytes, not text, since broken UTF-8 would be mended in silence. Statements are plain SQL,
 * independent of the code that wrote the rows.
 */
export const openSource = (sqlite: Sqlite.Database) =>
	Object.freeze({
		entries: () =>
			sqlite
				.prepare<[], StoredEntry>(
					'select seq, at, type, actor, cast(body as blob) as bytes from entry order by seq'
				)
				.iterate(),
		subject: sqlite
			.prepare<[string, number], number>('select seq from entry_subject where ref = ? and n = ?')
			.pluck(),
		/** Rows of entry_subject for which no entry was seen; asked only when their number is wrong. */
		subjects: () =>
			sqlite
				.prepare<[], { ref: string; n: number; seq: number }>(
					'select ref, n, seq from entry_subject order by ref, n'
				)
				.iterate(),
		subjectCount: () => count(sqlite, 'entry_subject'),
		nodes: sqlite
			.prepare<[number, number], Buffer>('select hash from node where pos between ? and ? order by pos')
			.pluck(),
		nodeCount: () => count(sqlite, 'node'),
		checkpoints: () =>
			sqlite
				.prepare<[], { size: number; root: Buffer; note: string; at: string }>(
					'select size, root, note, at from checkpoint order by size'
				)
				.all(),
		blobs: () =>
			sqlite
				.prepare<[], { sha256: string; size: number; bytes: Buffer }>(
					'select sha256, size, bytes from blob order by sha256'
				)
				.iterate(),
		blobExists: sqlite.prepare<[string], number>('select 1 from blob where sha256 = ?').pluck(),
		gates: () => count(sqlite, 'current_entry') + count(sqlite, 'never'),
		heads: () =>
			sqlite
				.prepare<[], { one: number; size: number; at: string }>('select one, size, at from log_head')
				.all()
	});

export type Source = ReturnType<typeof openSource>;

const count = (sqlite: Sqlite.Database, table: string): number =>
	sqlite.prepare<[], number>(`select count(*) from ${table}`).pluck().get()!;
