import type { Kysely } from 'kysely';
import type { Schema } from '$lib/server/db/schema';

type Q = Kysely<Schema>;

export const runByRef = (q: Q, ref: string) => q.selectFrom('run').selectAll().where('ref', '=', ref);

export const countRuns = (q: Q) => q.selectFrom('run').select((e) => e.fn.countAll<number>().as('n'));

/** Runs of one request, oldest first: the request's digest is equal. */
export const runsOfRequest = (q: Q, digest: string) =>
	q
		.selectFrom('run')
		.select(['ref', 'state', 'result_digest'])
		.where('request_digest', '=', digest)
		.orderBy('entry')
		.orderBy('requested_at')
		.orderBy('ref');

export const queuedRun = (q: Q, run: string) => q.selectFrom('run_queue').selectAll().where('run', '=', run);

/** Runs that were asked for and have not ended, in the order they were asked for. */
export const unfinishedRuns = (q: Q) =>
	q
		.selectFrom('run')
		.leftJoin('run_queue', 'run_queue.run', 'run.ref')
		.select(['run.ref as ref', 'run_queue.attempts as attempts'])
		.where('run.state', '=', 'requested')
		.orderBy('run.requested_at')
		.orderBy('run.ref');

export interface RunFilter {
	readonly model?: string | undefined;
	readonly models?: readonly string[] | undefined;
	readonly version?: string | undefined;
	readonly vintage?: string | undefined;
	readonly purpose?: 'planned' | 'validation' | 'exploratory' | undefined;
	readonly state?: 'requested' | 'finished' | 'failed' | 'cancelled' | undefined;
	readonly requestedBy?: string | undefined;
}

/** Runs, newest first; `before` is the reference of the last one already seen. */
export const runsPage = (q: Q, filter: RunFilter, limit: number, before?: { at: string; ref: string }) => {
	let query = q
		.selectFrom('run')
		.selectAll()
		.orderBy('requested_at', 'desc')
		.orderBy('ref', 'desc')
		.limit(limit);
	if (filter.model !== undefined) query = query.where('model', '=', filter.model);
	if (filter.models !== undefined) query = query.where('model', 'in', [...filter.models]);
	if (filter.version !== undefined) query = query.where('version', '=', filter.version);
	if (filter.vintage !== undefined) query = query.where('vintage', '=', filter.vintage);
	if (filter.purpose !== undefined) query = query.where('purpose', '=', filter.purpose);
	if (filter.state !== undefined) query = query.where('state', '=', filter.state);
	if (filter.requestedBy !== undefined) query = query.where('requested_by', '=', filter.requestedBy);
	if (before !== undefined)
		query = query.where((e) =>
			e.or([
				e('requested_at', '<', before.at),
				e.and([e('requested_at', '=', before.at), e('ref', '<', before.ref)])
			])
		);
	return query;
};

/** How many runs of a model were started, by purpose. */
export const countsByPurpose = (q: Q, model: string) =>
	q
		.selectFrom('run')
		.select(['purpose', (e) => e.fn.countAll<number>().as('n')])
		.where('model', '=', model)
		.groupBy('purpose');

/** The newest finished run of each model with a purpose: the one whose entry came last. */
export const latestFinished = (q: Q, purpose: 'planned' | 'validation' | 'exploratory') =>
	q
		.selectFrom('run')
		.selectAll()
		.where('entry', 'in', (e) =>
			e
				.selectFrom('run as finished')
				.select((f) => f.fn.max('finished.entry').as('entry'))
				.where('finished.purpose', '=', purpose)
				.where('finished.state', '=', 'finished')
				.groupBy('finished.model')
		);

/** Finished runs of a model, the last to end first. */
export const finishedRuns = (q: Q, model: string) =>
	q
		.selectFrom('run')
		.selectAll()
		.where('model', '=', model)
		.where('state', '=', 'finished')
		.orderBy('entry', 'desc');
