import type { Actor } from '$lib/domain/actor';
import { Absent } from '$lib/domain/faults';
import { parent } from '$lib/domain/references';
import { purposes, type Purpose } from '$lib/domain/permission-table';
import { allow } from '$lib/server/people/allow';
import { readableModels } from '$lib/server/register/visible';
import type { Ctx } from '../context';
import type { Handle } from '../db/handle';
import type { Schema } from '../db/schema';
import { viewOfRun, type RunView } from './run-view';
import { countsByPurpose, finishedRuns, runByRef, runsPage, type RunFilter } from './runs.queries';

export interface RunListing extends Omit<RunFilter, 'models'> {
	/** Reference of the last run already seen: the page goes on with older ones. */
	readonly before?: string | undefined;
	readonly limit?: number | undefined;
}

export interface RunPage {
	readonly runs: readonly RunView[];
	/** Reference to go on from; absent at the end. */
	readonly next?: string;
}

const mostRows = 200;

const startOf = (handle: Handle, before: string | undefined): { at: string; ref: string } | undefined => {
	if (before === undefined) return undefined;
	const row = handle.first(runByRef(handle.q, before));
	if (!row) throw new Absent(`There is no run ${before}.`);
	return { at: row.requested_at, ref: row.ref };
};

/** Readers of every run see the whole list; others those of their own models. */
const boundTo = (ctx: Ctx, handle: Handle, actor: Actor): { models?: readonly string[] } => {
	const models = readableModels(ctx, handle, actor, 'run.read');
	return models === 'all' ? {} : { models };
};

const views = (ctx: Ctx, handle: Handle, rows: readonly Schema['run'][]): RunView[] => {
	const names = ctx.people.names(rows.map((row) => row.requested_by as `p_${string}`));
	return rows.map((row) => viewOfRun(ctx, handle, row, names));
};

/** Runs that the reader may see, newest first, a page at a time. */
export const listRuns = (
	ctx: Ctx,
	actor: Actor,
	{ before, limit = 50, ...filter }: RunListing = {},
	handle: Handle = ctx.read
): RunPage => {
	allow(ctx, handle, actor, 'register.read');
	if (filter.model !== undefined) allow(ctx, handle, actor, 'run.read', { model: filter.model });
	const size = Math.min(Math.max(1, limit), mostRows);
	const bound = filter.model === undefined ? boundTo(ctx, handle, actor) : {};
	if (bound.models?.length === 0) return { runs: [] };
	const rows = handle.all(runsPage(handle.q, { ...filter, ...bound }, size + 1, startOf(handle, before)));
	const shown = rows.slice(0, size);
	return Object.freeze({
		runs: views(ctx, handle, shown),
		...(rows.length > size && { next: shown.at(-1)!.ref })
	});
};

/** Where a vintage was used: the runs on it that the reader may see. */
export const runsOnVintage = (
	ctx: Ctx,
	actor: Actor,
	vintage: string,
	handle: Handle = ctx.read
): readonly RunView[] => listRuns(ctx, actor, { vintage, limit: mostRows }, handle).runs;

/** Runs of a version, newest first. */
export const runsOnVersion = (
	ctx: Ctx,
	actor: Actor,
	version: string,
	handle: Handle = ctx.read
): readonly RunView[] =>
	listRuns(ctx, actor, { model: parent(version), version, limit: mostRows }, handle).runs;

/** How many runs of a model were started, by purpose: each kind is counted apart. */
export const runCounts = (
	ctx: Ctx,
	actor: Actor,
	model: string,
	handle: Handle = ctx.read
): Readonly<Record<Purpose, number>> => {
	allow(ctx, handle, actor, 'run.read', { model });
	const rows = handle.all(countsByPurpose(handle.q, model));
	return Object.freeze(
		Object.fromEntries(
			purposes.map((purpose) => [purpose, rows.find((row) => row.purpose === purpose)?.n ?? 0])
		) as Record<Purpose, number>
	);
};

/** The newest finished planned run of a model, of one version or of any; else the newest finished one of any purpose. */
export const latestRun = (
	ctx: Ctx,
	actor: Actor,
	model: string,
	version?: string,
	handle: Handle = ctx.read
): RunView | undefined => {
	allow(ctx, handle, actor, 'run.read', { model });
	const finished = handle
		.all(finishedRuns(handle.q, model))
		.filter((row) => version === undefined || row.version === version);
	const row = finished.find(({ purpose }) => purpose === 'planned') ?? finished[0];
	return row && views(ctx, handle, [row])[0];
};
