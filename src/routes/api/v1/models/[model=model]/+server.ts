import { api } from '$lib/server/http/api';
import { may } from '$lib/server/people/allow';
import { modelHeader, modelSheet } from '$lib/server/register/model-sheet';
import { signsOf } from '$lib/server/register/signs-view';
import { versionsOfModel } from '$lib/server/register/version-view';
import { runCounts } from '$lib/server/runs/run-list';
import type { RequestHandler } from './$types';

/** A model: whole for those who may read it, else reference, name, tier and state. */
export const GET: RequestHandler = (event) =>
	api(
		event,
		(ctx, actor) => {
			const { model } = event.params;
			if (!may(ctx, ctx.read, actor, 'model.read', { model })) return modelHeader(ctx, actor, model);
			const { may: rights, ...sheet } = modelSheet(ctx, actor, model);
			return {
				...sheet,
				signs: signsOf(ctx, actor, model).inForce,
				versionList: versionsOfModel(ctx, actor, model).map(({ ref, state, digest, submittedAt }) => ({
					ref,
					state,
					digest,
					submittedAt
				})),
				runs: runCounts(ctx, actor, model),
				rights
			};
		},
		{ scope: 'read' }
	);
