import type { Kysely } from 'kysely';
import type { Schema } from '../db/schema';
import type { EntryFilter } from './read';

type Q = Kysely<Schema>;

export const entryAt = (q: Q, seq: number) => q.selectFrom('entry').selectAll().where('seq', '=', seq);

export const hashAt = (q: Q, pos: number) => q.selectFrom('node').select('hash').where('pos', '=', pos);

export const logHead = (q: Q) => q.selectFrom('log_head').select(['size', 'at']);

export const latestCheckpoint = (q: Q) =>
	q.selectFrom('checkpoint').selectAll().orderBy('size', 'desc').limit(1);

export const blobOf = (q: Q, digest: string) =>
	q.selectFrom('blob').select('bytes').where('sha256', '=', digest);

export const blobExists = (q: Q, digest: string) =>
	q.selectFrom('blob').select('size').where('sha256', '=', digest);

/** The texts of `count` entries from a folio on. */
export const bodiesFrom = (q: Q, seq: number, count: number) =>
	q.selectFrom('entry').select(['seq', 'body']).where('seq', '>=', seq).orderBy('seq').limit(count);

export const changesIn = (q: Q, seq: number) =>
	q
		.selectFrom('entry_change')
		.select(['tbl', 'row', 'before', 'after'])
		.where('entry', '=', seq)
		.orderBy('n');

export const firstFrom = (q: Q, seq: number) => q.selectFrom('entry').select('at').where('seq', '=', seq);

export const leastActorAfter = (q: Q, actor: string) =>
	q.selectFrom('entry').select('actor').where('actor', '>', actor).orderBy('actor').limit(1);

/** Entries under a filter, by folio. */
export const entriesBetween = (q: Q, filter: EntryFilter, order: 'newest' | 'oldest', count: number) => {
	let query = q.selectFrom('entry').select('body');
	if (filter.type !== undefined) query = query.where('type', '=', filter.type);
	if (filter.actor !== undefined) query = query.where('actor', '=', filter.actor);
	if (filter.after !== undefined) query = query.where('entry.seq', '>', filter.after);
	if (filter.before !== undefined) query = query.where('entry.seq', '<', filter.before);
	if (filter.subject !== undefined) query = query.where('entry.seq', 'in', about(q, [filter.subject]));
	if (filter.within !== undefined) query = query.where('entry.seq', 'in', about(q, filter.within));
	return query.orderBy('entry.seq', order === 'newest' ? 'desc' : 'asc').limit(count);
};

const about = (q: Q, refs: readonly string[]) =>
	q
		.selectFrom('entry_subject')
		.select('seq')
		.where('ref', 'in', [...refs]);

export const checkpointAt = (q: Q, size: number) =>
	q.selectFrom('checkpoint').select('size').where('size', '=', size);

export const newestFolio = (q: Q) => q.selectFrom('entry').select('seq').orderBy('seq', 'desc').limit(1);

export const openGates = (q: Q) => q.selectFrom('current_entry').select('seq').limit(1);
