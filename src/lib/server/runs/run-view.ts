import type { Actor, PersonId } from '$lib/domain/actor';
import type { Payload } from '$lib/domain/events';
import { Absent, Conflict } from '$lib/domain/faults';
import type { Override, Purpose, RunRequest, Verdict } from '$lib/domain/run';
import type { RunResult } from '$lib/domain/run-result';
import { allow, may } from '$lib/server/people/allow';
import type { Ctx } from '../context';
import type { Handle } from '../db/handle';
import type { Schema } from '../db/schema';
import { progressOf } from './execution';
import { runByRef, runsOfRequest } from './runs.queries';
import type { Progress } from './task';

export type RunState = 'queued' | 'running' | 'finished' | 'failed' | 'cancelled';

/** The other runs of the same request: same request, same digest. */
export interface Reruns {
	/** This is the n-th of `of`. */
	readonly nth: number;
	readonly of: number;
	readonly refs: readonly string[];
	/** Against the first finished run of the request; `alone` while there is none to compare with. */
	readonly digest: 'alone' | 'equal' | 'different';
}

/** A run as lists and its own page show it. */
export interface RunView {
	readonly ref: string;
	readonly model: string;
	readonly version: string;
	readonly vintage: string;
	/** SHA-256 of the vintage's exact bytes, and of the table read from them. */
	readonly file: string;
	readonly table: string;
	readonly policy: string;
	readonly tier: number;
	readonly purpose: Purpose;
	readonly settings: readonly Override[];
	readonly seed: number;
	readonly engine: string;
	readonly request: string;
	readonly state: RunState;
	readonly progress?: Progress;
	readonly requestedBy: string;
	readonly requestedAt: string;
	readonly endedAt?: string;
	readonly failure?: string;
	readonly resultDigest?: string;
	readonly checks?: Payload<'run.finished'>['checks'];
	readonly groups?: readonly { readonly group: string; readonly verdict: Verdict }[];
	readonly headline?: Payload<'run.finished'>['headline'];
	readonly reruns: Reruns;
	readonly entry: number;
}

type RunRow = Schema['run'];

const stateOf = (row: RunRow, progress: Progress | undefined): RunState =>
	row.state !== 'requested' ? row.state : progress ? 'running' : 'queued';

const rerunsOf = (handle: Handle, row: RunRow): Reruns => {
	const same = handle.all(runsOfRequest(handle.q, row.request_digest));
	const first = same.find(({ state, ref }) => state === 'finished' && ref !== row.ref);
	const comparable = first !== undefined && row.result_digest !== null;
	return {
		nth: same.findIndex(({ ref }) => ref === row.ref) + 1,
		of: same.length,
		refs: same.map(({ ref }) => ref),
		digest: !comparable ? 'alone' : first.result_digest === row.result_digest ? 'equal' : 'different'
	};
};

/** The view of a row; `names` as the directory gives them. */
export const viewOfRun = (
	ctx: Ctx,
	handle: Handle,
	row: RunRow,
	names: ReadonlyMap<string, string>
): RunView => {
	const progress = row.state === 'requested' ? progressOf(ctx, row.ref) : undefined;
	return Object.freeze({
		ref: row.ref,
		model: row.model,
		version: row.version,
		vintage: row.vintage,
		file: row.file_sha256,
		table: row.table_sha256,
		policy: row.policy_digest,
		tier: row.tier,
		purpose: row.purpose,
		settings: JSON.parse(row.settings) as Override[],
		seed: row.seed,
		engine: row.engine,
		request: row.request_digest,
		state: stateOf(row, progress),
		...(progress && { progress }),
		requestedBy: names.get(row.requested_by) ?? row.requested_by,
		requestedAt: row.requested_at,
		...(row.ended_at !== null && { endedAt: row.ended_at }),
		...(row.failure !== null && { failure: row.failure }),
		...(row.result_digest !== null && { resultDigest: row.result_digest }),
		...(row.holds !== null && {
			checks: {
				holds: row.holds,
				query: row.query ?? 0,
				fails: row.fails ?? 0,
				notAssessable: row.not_assessable ?? 0
			}
		}),
		...(row.groups !== null && { groups: JSON.parse(row.groups) as RunView['groups'] & object }),
		...(row.headline !== null && { headline: JSON.parse(row.headline) as RunView['headline'] & object }),
		reruns: rerunsOf(handle, row),
		entry: row.entry
	});
};

const readableRow = (ctx: Ctx, handle: Handle, actor: Actor, ref: string): RunRow => {
	const row = handle.first(runByRef(handle.q, ref));
	if (!row) throw new Absent(`There is no run ${ref}.`);
	allow(ctx, handle, actor, 'run.read', { model: row.model });
	return row;
};

/** A run with its state and progress. @throws Absent, also where the reader may not know of it */
export const runOf = (
	ctx: Ctx,
	actor: Actor,
	ref: string,
	handle: Handle = ctx.read
): RunView & { readonly mayCancel: boolean } => {
	const row = readableRow(ctx, handle, actor, ref);
	const starter = row.requested_by as PersonId;
	const names = ctx.people.names([starter]);
	const mayCancel =
		row.state === 'requested' && may(ctx, handle, actor, 'run.cancel', { model: row.model, starter });
	return Object.freeze({ ...viewOfRun(ctx, handle, row, names), mayCancel });
};

const bytesOf = (ctx: Ctx, digest: string): Buffer => {
	const bytes = ctx.blobs.get(digest);
	if (!bytes) throw new Absent(`The bytes of ${digest} are not in this register.`);
	return bytes;
};

/** The exact request that was computed. */
export const requestOf = (ctx: Ctx, actor: Actor, ref: string, handle: Handle = ctx.read): RunRequest =>
	JSON.parse(bytesOf(ctx, readableRow(ctx, handle, actor, ref).request_digest).toString()) as RunRequest;

/** The exact bytes of a result as they were stored. @throws Conflict while there are none */
export const resultBytes = (ctx: Ctx, actor: Actor, ref: string, handle: Handle = ctx.read): Buffer => {
	const row = readableRow(ctx, handle, actor, ref);
	if (row.result_blob !== null) return bytesOf(ctx, row.result_blob);
	const ended = row.state === 'failed' ? 'failed' : 'was cancelled';
	throw new Conflict(
		row.state === 'requested' ? `${ref} is still being computed.` : `${ref} has no result: it ${ended}.`
	);
};

/** The whole result of a run. @throws Conflict while there is none */
export const resultOf = (ctx: Ctx, actor: Actor, ref: string, handle: Handle = ctx.read): RunResult =>
	JSON.parse(resultBytes(ctx, actor, ref, handle).toString()) as RunResult;
