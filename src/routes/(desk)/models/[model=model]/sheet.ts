import type { Actor } from '$lib/domain/actor';
import type { RunResult } from '$lib/domain/run-result';
import { readVintage, vintagesOfModel } from '$lib/server/lineage/read';
import { may } from '$lib/server/people/allow';
import { adoptedPolicy } from '$lib/server/policy/policy';
import { validatorCandidates } from '$lib/server/register/candidates';
import { modelHeader, modelSheet } from '$lib/server/register/model-sheet';
import { signsOf } from '$lib/server/register/signs-view';
import { teamOf } from '$lib/server/register/team';
import { tierHistory } from '$lib/server/register/tier-history';
import { versionsOfModel } from '$lib/server/register/version-view';
import { waitingInRegister } from '$lib/server/register/waiting';
import { latestRun, listRuns, runCounts } from '$lib/server/runs/run-list';
import { resultOf, runOf } from '$lib/server/runs/run-view';
import type { Ctx } from '$lib/server/context';

const recentRuns = 6;

/** The run the sheet speaks of: the newest finished planned one, with its result and data. */
const faceOf = (ctx: Ctx, actor: Actor, model: string) => {
	const latest = latestRun(ctx, actor, model);
	if (!latest) return undefined;
	const { vintageDate } = readVintage(ctx, ctx.read, latest.vintage);
	const result: RunResult = resultOf(ctx, actor, latest.ref);
	return { run: runOf(ctx, actor, latest.ref), vintageDate, result };
};

/** The answers the adopted policy offers, for the form that edits the registration. */
const questionsOf = (ctx: Ctx) => {
	const { policy } = adoptedPolicy(ctx, ctx.read);
	return {
		questions: policy.questions.map(({ id, asks, answers }) => ({ id, asks, answers })),
		tiers: policy.tiers.map(({ tier }) => tier)
	};
};

/** What the sheet of a model shows to a reader who sees it whole; the header to everybody else. */
export const sheetPage = (ctx: Ctx, actor: Actor, model: string) => {
	const team = may(ctx, ctx.read, actor, 'party.grant', { model }) ? teamOf(ctx, actor, model) : undefined;
	if (!may(ctx, ctx.read, actor, 'model.read', { model }))
		return { header: modelHeader(ctx, actor, model), whole: undefined, team };
	const sheet = modelSheet(ctx, actor, model);
	return {
		header: { ref: sheet.ref, name: sheet.name, tier: sheet.tier, state: sheet.state },
		team,
		whole: {
			sheet,
			face: faceOf(ctx, actor, model),
			signs: signsOf(ctx, actor, model),
			versions: versionsOfModel(ctx, actor, model).map(
				({ ref, ordinal, state, reason, revisedAt, submittedAt, predecessor, draftedBy }) => ({
					ref,
					ordinal,
					state,
					reason,
					revisedAt,
					submittedAt,
					predecessor,
					draftedBy
				})
			),
			vintages: vintagesOfModel(ctx.read, model).map(
				({ ref, fileName, from, to, vintageDate, observations }) => ({
					ref,
					fileName,
					from,
					to,
					vintageDate,
					observations
				})
			),
			counts: runCounts(ctx, actor, model),
			runs: listRuns(ctx, actor, { model, limit: recentRuns }).runs,
			history: tierHistory(ctx, actor, model),
			waiting: waitingInRegister(ctx, actor).filter((item) => item.model === model),
			candidates: sheet.may.assign ? validatorCandidates(ctx, model) : [],
			...questionsOf(ctx)
		}
	};
};
