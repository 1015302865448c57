import type { Actor } from '$lib/domain/actor';
import { policyLine } from '$lib/domain/policy';
import { purposes, type Purpose } from '$lib/domain/run';
import type { RunResult } from '$lib/domain/run-result';
import { readVintage } from '$lib/server/lineage/read';
import { may } from '$lib/server/people/allow';
import { policyOf } from '$lib/server/policy/policy';
import { modelHeader } from '$lib/server/register/model-sheet';
import { versionOf } from '$lib/server/register/version-view';
import { listRuns } from '$lib/server/runs/run-list';
import { resultOf, runOf, type RunView } from '$lib/server/runs/run-view';
import type { Ctx } from '$lib/server/context';
import { policyLineView, type PolicyLineView } from '$lib/ui/report/policy-lines';

/** How many other runs of the model the comparison offers. */
const mostOthers = 50;

const purposeWords: Readonly<Record<Purpose, string>> = {
	planned: 'planned: the battery at its due date',
	validation: "validation: the validator's own",
	exploratory: 'exploratory: counted apart'
};

/** The purposes this reader may start the same run again with. */
const offeredPurposes = (ctx: Ctx, actor: Actor, { model, version }: RunView) => {
	const { state } = versionOf(ctx, actor, version);
	if (state === 'withdrawn') return [];
	return purposes
		.filter((purpose) => state !== 'draft' || purpose === 'exploratory')
		.filter((purpose) => may(ctx, ctx.read, actor, 'run.start', { model, purpose }))
		.map((purpose) => ({ value: purpose, label: purposeWords[purpose] }));
};

/** Finished runs of the same model, newest first, and the one before this. */
const otherRuns = (ctx: Ctx, actor: Actor, run: RunView) => {
	const { runs } = listRuns(ctx, actor, { model: run.model, state: 'finished', limit: mostOthers });
	const others = runs
		.filter(({ ref }) => ref !== run.ref)
		.map(({ ref, version, vintage, purpose, requestedAt }) => ({
			ref,
			version,
			vintage,
			purpose,
			requestedAt
		}));
	return { others, previous: others.find(({ requestedAt }) => requestedAt <= run.requestedAt)?.ref };
};

/** Every policy line that the result or the settings cite, as it stood in the policy the run was judged by. */
const citedLines = (ctx: Ctx, run: RunView, result: RunResult | null): Record<string, PolicyLineView> => {
	const policy = policyOf(ctx, ctx.read, run.policy);
	const paths = [
		...(result?.checks.flatMap(({ thresholdFrom }) => thresholdFrom) ?? []),
		...run.settings.map(({ setting }) => setting)
	];
	return Object.fromEntries(
		[...new Set(paths)].flatMap((path) => {
			const line = policyLine(policy, path);
			return line ? [[path, policyLineView(line, path, run.policy)]] : [];
		})
	);
};

/** What the page of a run shows; the result once there is one. */
export const runPage = (ctx: Ctx, actor: Actor, ref: string) => {
	const run = runOf(ctx, actor, ref);
	const result = run.state === 'finished' ? resultOf(ctx, actor, ref) : null;
	const { vintageDate, fileName } = readVintage(ctx, ctx.read, run.vintage);
	return {
		run,
		result,
		model: modelHeader(ctx, actor, run.model).name,
		vintage: { vintageDate, fileName },
		policyRelease: policyOf(ctx, ctx.read, run.policy).release,
		lines: citedLines(ctx, run, result),
		purposes: offeredPurposes(ctx, actor, run),
		...otherRuns(ctx, actor, run)
	};
};
