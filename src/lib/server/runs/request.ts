import { z } from 'zod';
import { engineVersion } from '$lib/battery/engine';
import { settingsOf } from '$lib/battery/settings';
import { canonical } from '$lib/chain/canonical';
import { digestOf } from '$lib/chain/digest';
import type { Actor } from '$lib/domain/actor';
import { Conflict, Invalid } from '$lib/domain/faults';
import type { Policy } from '$lib/domain/policy';
import { parent, reference } from '$lib/domain/references';
import { reasonSchema, taken } from '$lib/domain/register-input';
import { purposes, type Purpose } from '$lib/domain/permission-table';
import { overrideSchema, type Override, type RunRequest } from '$lib/domain/run';
import type { Specification } from '$lib/domain/specification';
import { modelMayUse, readVintage } from '$lib/server/lineage/read';
import { record } from '$lib/server/log/record';
import { allow } from '$lib/server/people/allow';
import { adoptedPolicy } from '$lib/server/policy/policy';
import { requireSigns } from '$lib/server/register/signs';
import { tierOfModel } from '$lib/server/register/tier';
import { requireVersion, type VersionRow } from '$lib/server/register/version';
import type { Ctx } from '../context';
import type { Tx } from '../db/handle';
import { enqueue } from './execution';
import { countRuns } from './runs.queries';

/** Used where nobody names a seed: equal requests then have equal digests. */
export const defaultSeed = 1;

const requesting = z.strictObject({
	version: z.string(),
	vintage: z.string(),
	purpose: z.enum(purposes),
	settings: z
		.array(overrideSchema.extend({ reason: reasonSchema }))
		.max(50)
		.default([]),
	seed: z.coerce.number<number>().int().min(0).max(4294967295).default(defaultSeed)
});
export type RunInput = z.input<typeof requesting>;

/** A setting replaces a line that the policy lets runs replace, once. */
const requireSettings = (policy: Policy, settings: readonly Override[]): void => {
	settingsOf(policy, settings);
	settings.forEach(({ setting }, i) => {
		if (settings.findIndex((each) => each.setting === setting) !== i)
			throw new Invalid([{ pointer: `/settings/${i}/setting`, message: `${setting} is replaced twice.` }]);
	});
};

/** Drafts are for exploring; what is planned or validated binds a version that can no longer change. */
const requireState = ({ ref, state }: VersionRow, purpose: Purpose): void => {
	if (state === 'withdrawn') throw new Conflict(`${ref} was withdrawn: nothing is run on it any more.`);
	if (state === 'draft' && purpose !== 'exploratory')
		throw new Conflict(`${ref} is a draft: submit it first, or start an exploratory run.`);
};

/** The one thing the result is a function of. */
const requestOf = (
	ctx: Ctx,
	tx: Tx,
	row: VersionRow,
	table: string,
	input: z.output<typeof requesting>
): RunRequest => {
	const { digest, policy } = adoptedPolicy(ctx, tx);
	requireSettings(policy, input.settings);
	return {
		specification: JSON.parse(row.specification) as Specification,
		vintage: table,
		policy: digest,
		tier: tierOfModel(ctx, tx, row.model).tier,
		settings: input.settings,
		seed: input.seed,
		purpose: input.purpose,
		engine: engineVersion
	};
};

/**
 * Asks for a run of a version on a vintage. The entry holds the digest of the whole request, and the request is kept as
 * a blob; the computing goes on in another thread.
 * @returns its reference, `R-0207`
 * @throws Refused by the permission table or `signs-first`; Conflict with the version's state; Invalid per field
 */
export const requestRun = (ctx: Ctx, actor: Actor, input: RunInput): string => {
	const asked = taken(requesting, input);
	const model = parent(asked.version);
	const ref = ctx.write((tx) => {
		const grant = allow(ctx, tx, actor, 'run.start', { model, purpose: asked.purpose });
		const row = requireVersion(tx, asked.version);
		requireState(row, asked.purpose);
		requireSigns(tx, model, JSON.parse(row.specification) as Specification, 'run.start');
		if (!modelMayUse(tx, model, parent(asked.vintage)))
			throw new Invalid([
				{
					pointer: '/vintage',
					message: `${parent(asked.vintage)} is not a dataset of ${model}: attach it first.`
				}
			]);
		const { sha256: file, table } = readVintage(ctx, tx, asked.vintage);
		const request = requestOf(ctx, tx, row, table, asked);
		const bytes = Buffer.from(canonical(request));
		const run = reference('run', (tx.first(countRuns(tx.q))?.n ?? 0) + 1);
		ctx.blobs.put(tx, bytes);
		const { policy, tier, settings, seed, purpose, engine } = request;
		record(ctx, tx, actor, grant, {
			type: 'run.requested',
			subjects: [model, asked.version, asked.vintage, run],
			payload: {
				run,
				model,
				version: asked.version,
				vintage: asked.vintage,
				file,
				table,
				policy,
				tier,
				settings,
				seed,
				purpose,
				engine,
				request: digestOf(bytes)
			}
		});
		tx.insert('run_queue', { run, enqueued_at: ctx.now().toISOString(), attempts: 1 });
		return run;
	});
	enqueue(ctx, ref);
	return ref;
};
