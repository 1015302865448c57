import { sql, type Kysely } from 'kysely';

/** The log's own tables: entries, their subjects, the Merkle tree, checkpoints, blobs and the commit gate. */
export const up = async (db: Kysely<unknown>): Promise<void> => {
	// The columns are copies for finding entries; the checks bind them to the bytes.
	await sql`create table entry (
		seq integer primary key check (seq >= 0),
		at text not null,
		type text not null,
		actor text not null,
		body text not null check (json_valid(body) and length(cast(body as blob)) <= 65536),
		check (json_extract(body, '$.seq') = seq and json_extract(body, '$.at') = at
			and json_extract(body, '$.type') = type and json_extract(body, '$.actor') = actor)
	) strict`.execute(db);
	await sql`create index entry_by_type on entry (type, seq)`.execute(db);
	await sql`create index entry_by_actor on entry (actor, seq)`.execute(db);
	await sql`create table entry_subject (
		ref text not null,
		n integer not null check (n >= 1),
		seq integer not null references entry (seq),
		primary key (ref, n)
	) strict, without rowid`.execute(db);
	await sql`create table node (
		pos integer primary key check (pos >= 0),
		hash blob not null check (length(hash) = 32)
	) strict`.execute(db);
	await sql`create table checkpoint (
		size integer primary key check (size >= 1),
		root blob not null check (length(root) = 32),
		note text not null,
		at text not null
	) strict`.execute(db);
	await sql`create table blob (
		sha256 text primary key check (sha256 glob 'sha256:*' and length(sha256) = 71),
		size integer not null check (size = length(bytes)),
		bytes blob not null
	) strict`.execute(db);
	// What each entry changed, row by row: entered by triggers on the projected tables, never by hand.
	await sql`create table entry_change (
		entry integer not null,
		n integer not null check (n >= 1),
		tbl text not null,
		row text not null,
		before text check (json_valid(before)),
		after text check (json_valid(after)),
		primary key (entry, n)
	) strict, without rowid`.execute(db);
	// The commit gate: a row here breaks a deferred foreign key, so that COMMIT fails until it is deleted.
	await sql`create table never (seq integer primary key check (0)) strict`.execute(db);
	await sql`create table current_entry (
		seq integer not null references never (seq) deferrable initially deferred
	) strict`.execute(db);
	await sql`create table log_head (
		one integer primary key check (one = 1),
		size integer not null,
		at text not null
	) strict`.execute(db);
	await sql`insert into log_head (one, size, at) values (1, 0, '')`.execute(db);
};
