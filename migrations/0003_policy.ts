import { sql, type Kysely } from 'kysely';

/** Policies proposed and adopted; the released files themselves are part of the program. */
export const up = async (db: Kysely<unknown>): Promise<void> => {
	await sql`create table policy_proposal (
		proposal integer primary key,
		digest text not null check (digest glob 'sha256:*' and length(digest) = 71),
		release text not null,
		document text,
		changed text not null check (json_valid(changed)),
		at text not null,
		by text not null,
		state text not null check (state in ('open', 'adopted', 'superseded')),
		entry integer not null
	) strict`.execute(db);
	await sql`create table policy (
		adopted integer primary key,
		digest text not null check (digest glob 'sha256:*' and length(digest) = 71),
		release text not null,
		document text,
		at text not null,
		by text not null,
		proposed_by text,
		proposal integer references policy_proposal (proposal),
		entry integer not null
	) strict`.execute(db);
};
