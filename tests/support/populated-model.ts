import type { Actor, PersonId } from '$lib/domain/actor';
import type { Ctx } from '$lib/server/context';
import { confirmVintage } from '$lib/server/lineage/confirm';
import { storeUpload } from '$lib/server/lineage/upload';
import { registerModel } from '$lib/server/register/model';
import { declareSigns } from '$lib/server/register/signs';
import { draftVersion, submitVersion, withdrawVersion } from '$lib/server/register/version';
import { settled } from '$lib/server/runs/execution';
import { requestRun } from '$lib/server/runs/request';
import { ordinal, parent } from '$lib/domain/references';
import { lossOnUnemployment } from '../domain/specification-example';
import { modelInput, unemploymentUp } from '../server/register/bank';
import { lossFile } from '../server/runs/setting';

/** What a model's story leaves behind. */
export interface ToldModel {
	readonly model: string;
	readonly submitted: number;
	readonly draft: number;
	readonly withdrawn: number;
	readonly dataset: string;
	readonly run: string;
	readonly seq: number;
}

const store = async (ctx: Ctx, owner: Actor, model: string): Promise<string> => {
	// Figures of its own for each model: the same bytes twice would be one file.
	const bytes = Buffer.from(lossFile(ordinal(model)));
	const { upload, sha256 } = await storeUpload(ctx, owner, { model, bytes, fileName: 'loss.csv' });
	return confirmVintage(ctx, owner, model, {
		upload,
		sha256,
		name: 'Losses and unemployment',
		vintageDate: ctx.now().toISOString().slice(0, 10),
		columns: ['loss', 'unemp'].map((column) => ({
			column,
			role: 'observed' as const,
			unit: '%',
			source: 'invented for this test'
		}))
	});
};

/** A submitted version, one that was run and then withdrawn, and a draft; and the run. */
const versions = async (ctx: Ctx, owner: Actor, model: string, vintage: string) => {
	const specification = lossOnUnemployment();
	const draft = (reason: string): string => draftVersion(ctx, owner, { model, specification, reason });
	const submitted = draft('The first one.');
	submitVersion(ctx, owner, submitted);
	const withdrawn = draft('Another one.');
	const run = requestRun(ctx, owner, { version: withdrawn, vintage, purpose: 'exploratory' });
	await settled(ctx, run);
	withdrawVersion(ctx, owner, withdrawn, 'It adds nothing.');
	return {
		submitted: ordinal(submitted),
		withdrawn: ordinal(withdrawn),
		draft: ordinal(draft('One more, unfinished.')),
		run
	};
};

/** Registers a model with data, a submitted, a withdrawn and a draft version, and a finished run. */
export const modelStory = async (
	ctx: Ctx,
	owner: Actor,
	developers: readonly PersonId[]
): Promise<ToldModel> => {
	const model = registerModel(ctx, owner, modelInput({ developers: [...developers] }));
	const seq = ctx.log.frontier().size - 1;
	declareSigns(ctx, owner, { model, drivers: [unemploymentUp] });
	const vintage = await store(ctx, owner, model);
	return { model, dataset: parent(vintage), seq, ...(await versions(ctx, owner, model, vintage)) };
};
