import { system } from '$lib/domain/actor';
import type { RunRequest } from '$lib/domain/run';
import { readTable } from '$lib/server/lineage/read';
import { record } from '$lib/server/log/record';
import { policyOf } from '$lib/server/policy/policy';
import type { Ctx } from '../context';
import type { Tx } from '../db/handle';
import type { Pool } from './pool';
import { runByRef, unfinishedRuns } from './runs.queries';
import type { Computed, Progress } from './task';

/** What this process knows of a run that has not ended. */
interface Job {
	readonly controller: AbortController;
	/** Undefined while the run waits for a thread. */
	progress: Progress | undefined;
	readonly ended: Promise<void>;
}

/** Kept in memory: after a restart every unfinished run waits again. */
const jobs = new WeakMap<Pool, Map<string, Job>>();

const jobsOf = (pool: Pool): Map<string, Job> => {
	let all = jobs.get(pool);
	if (!all) jobs.set(pool, (all = new Map()));
	return all;
};

/** A run longer than this is stopped. */
const longest = 15 * 60_000;
/** Starts of the server that one run may survive without ending. */
const mostAttempts = 3;

const requestId = 'run';
const asSystem = { rule: 'system' } as const;

/** Ends a run once: whoever comes second (a cancellation, another finish) finds it ended and leaves it. */
const end = (ctx: Ctx, ref: string, enter: (tx: Tx, subjects: readonly string[]) => void): void =>
	ctx.write((tx) => {
		const row = tx.first(runByRef(tx.q, ref));
		tx.remove('run_queue', { run: ref });
		if (row?.state === 'requested') enter(tx, [row.model, row.version, row.ref]);
	});

const finish = (ctx: Ctx, ref: string, computed: Extract<Computed, { state: 'computed' }>): void =>
	end(ctx, ref, (tx, subjects) => {
		const { bytes, digest, checks, groups, headline } = computed;
		const result = ctx.blobs.put(tx, bytes);
		record(ctx, tx, system(requestId), asSystem, {
			type: 'run.finished',
			subjects,
			payload: { run: ref, result, resultDigest: digest, checks, groups: [...groups], headline }
		});
	});

const fail = (ctx: Ctx, ref: string, sentence: string): void =>
	end(ctx, ref, (tx, subjects) => {
		record(ctx, tx, system(requestId), asSystem, {
			type: 'run.failed',
			subjects,
			payload: { run: ref, sentence }
		});
	});

const sentenceOf = (fault: unknown, timedOut: boolean): string => {
	if (timedOut) return `The computation was stopped after ${longest / 60_000} minutes.`;
	const words = fault instanceof Error ? fault.message : String(fault);
	return `The computation ended with an error: ${words.slice(0, 500)}`;
};

const perform = async (ctx: Ctx, ref: string, job: Pick<Job, 'controller' | 'progress'>): Promise<void> => {
	const row = ctx.read.first(runByRef(ctx.read.q, ref));
	if (row?.state !== 'requested') return;
	const limit = AbortSignal.timeout(longest);
	try {
		const blob = ctx.blobs.get(row.request_digest);
		if (!blob) throw new Error('the stored request is missing');
		const request = JSON.parse(blob.toString()) as RunRequest;
		const { frequency, periods, columns } = readTable(ctx, { table: row.table_sha256 });
		const computed = await ctx.pool.compute(
			{ request, policy: policyOf(ctx, ctx.read, row.policy_digest), data: { frequency, periods, columns } },
			{
				signal: AbortSignal.any([job.controller.signal, limit]),
				progress: (progress) => (job.progress = progress)
			}
		);
		if (computed.state === 'refused') fail(ctx, ref, computed.sentence);
		else finish(ctx, ref, computed);
	} catch (fault) {
		// A cancelled run has its entry already; at shutdown the run stays in the queue and is computed after the start.
		if (job.controller.signal.aborted || ctx.pool.closed()) return;
		fail(ctx, ref, sentenceOf(fault, limit.aborted));
	}
};

/** Hands a run to the pool; called after the request was committed. */
export const enqueue = (ctx: Ctx, ref: string): void => {
	const all = jobsOf(ctx.pool);
	if (all.has(ref)) return;
	const job = { controller: new AbortController(), progress: undefined as Progress | undefined };
	const ended = perform(ctx, ref, job)
		// The end could not be entered (a full disk): the run stays in the queue, and the server goes on.
		.catch((fault: unknown) => process.stderr.write(`${ref} could not be ended: ${String(fault)}\n`))
		.then(() => void all.delete(ref));
	all.set(ref, Object.assign(job, { ended }));
};

/** Stops the thread of a run. */
export const stop = (ctx: Ctx, ref: string): void => jobsOf(ctx.pool).get(ref)?.controller.abort();

/** How far a run is: undefined while it waits for a thread, or when this process does not know it. */
export const progressOf = (ctx: Ctx, ref: string): Progress | undefined =>
	jobsOf(ctx.pool).get(ref)?.progress;

/** Resolves when the run has ended, at once when it is not being computed. */
export const settled = async (ctx: Ctx, ref: string): Promise<void> => {
	await jobsOf(ctx.pool).get(ref)?.ended;
};

/**
 * Takes up every run that an earlier process left unfinished. A run that did not end in three starts is given up: it
 * may be what ended the process.
 */
export const startRuns = (ctx: Ctx): void => {
	for (const { ref, attempts } of ctx.read.all(unfinishedRuns(ctx.read.q))) {
		const tried = (attempts ?? 0) + 1;
		if (tried > mostAttempts) {
			fail(ctx, ref, `The computation did not end in ${mostAttempts} starts of the server and was given up.`);
			continue;
		}
		ctx.write((tx) => {
			tx.remove('run_queue', { run: ref });
			tx.insert('run_queue', { run: ref, enqueued_at: ctx.now().toISOString(), attempts: tried });
		});
		enqueue(ctx, ref);
	}
};
