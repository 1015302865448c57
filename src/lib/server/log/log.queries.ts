import type { Kysely } from 'kysely';
import type { Schema } from '../db/schema';

type Q = Kysely<Schema>;

export const entryAt = (q: Q, seq: number) => q.selectFrom('entry').selectAll().where('seq', '=', seq);

export const lastEntry = (q: Q) =>
	q.selectFrom('entry').select(['seq', 'at']).orderBy('seq', 'desc').limit(1);

/** The latest entry of a subject: its count and folio. */
export const lastOfSubject = (q: Q, ref: string) =>
	q.selectFrom('entry_subject').select(['n', 'seq']).where('ref', '=', ref).orderBy('n', 'desc').limit(1);

export const hashAt = (q: Q, pos: number) => q.selectFrom('node').select('hash').where('pos', '=', pos);

export const closeGate = (q: Q) => q.deleteFrom('current_entry');

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
