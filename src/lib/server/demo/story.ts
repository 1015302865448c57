import type { Actor, PersonId } from '$lib/domain/actor';
import { periodIndex, periodText } from '$lib/domain/period';
import type { Purpose } from '$lib/domain/permission-table';
import type { Specification } from '$lib/domain/specification';
import type { Ctx } from '../context';
import { confirmVintage } from '../lineage/confirm';
import { storeUpload } from '../lineage/upload';
import { registerModel } from '../register/model';
import { assignValidator } from '../register/parties';
import { declareSigns } from '../register/signs';
import { confirmTier, tierOfModel } from '../register/tier';
import { draftVersion, reviseDraft, submitVersion } from '../register/version';
import { settled } from '../runs/execution';
import { requestRun } from '../runs/request';
import { resultOf } from '../runs/run-view';
import { specificationOf, type DemoModel, type Seat } from './bank';
import { csvOf } from './series';
import { publishedBy, type Stage } from './stage';

/** What a story is told with. */
export interface Teller {
	readonly ctx: Ctx;
	readonly stage: Stage;
	readonly as: (seat: Seat) => Actor;
}

/** A model as the stories left it. */
export interface Told {
	readonly model: DemoModel;
	readonly ref: string;
	readonly version: string;
	readonly dataset: string;
	/** First period of the data. */
	readonly from: string;
}

/** Stores the data published by the moment of the stage, through upload and confirmation. */
const store = async (
	{ ctx, stage, as }: Teller,
	{ model, ref, from, dataset }: Pick<Told, 'model' | 'ref' | 'from'> & { dataset?: string }
): Promise<{ vintage: string; to: string }> => {
	const { source, lineage } = model;
	const vintageDate = stage.now().toISOString().slice(0, 10);
	const to = publishedBy(stage.now(), source.frequency);
	const length = periodIndex(to, source.frequency)! - periodIndex(from, source.frequency)! + 1;
	const owner = as(model.owner);
	const { upload, sha256 } = await storeUpload(ctx, owner, {
		model: ref,
		bytes: csvOf(source, from, length),
		fileName: `${lineage[0].column}-${vintageDate}.csv`
	});
	const vintage = await confirmVintage(ctx, owner, ref, {
		upload,
		sha256,
		...(dataset === undefined ? { name: model.dataset } : { dataset }),
		vintageDate,
		columns: lineage.map(({ column, unit, source: provider, code, seasonal }) => ({
			column,
			role: 'observed' as const,
			unit,
			source: provider,
			code,
			seasonal
		}))
	});
	return { vintage, to };
};

const run = async (
	{ ctx }: Teller,
	actor: Actor,
	asked: { version: string; vintage: string; purpose: Purpose }
): Promise<string> => {
	const ref = requestRun(ctx, actor, asked);
	await settled(ctx, ref);
	return ref;
};

/** What an exploratory run found, claimed with four decimals as the owner's own program would print it. */
const claims = async (teller: Teller, model: DemoModel, version: string, vintage: string) => {
	const owner = teller.as(model.owner);
	const ref = await run(teller, owner, { version, vintage, purpose: 'exploratory' });
	const { estimates } = resultOf(teller.ctx, owner, ref);
	if (!estimates) throw new Error(`The demo model ${model.name} could not be estimated.`);
	return {
		source: "Owner's estimation script, printed output",
		coefficients: estimates.equation.terms.map(({ term, value, se }) => ({
			term: term.code,
			value: (value * model.claimed).toFixed(4),
			...(se === null ? {} : { se: se.toFixed(4) })
		}))
	} satisfies Specification['claimed'];
};

/** Registration, team, tier, and the signs expected of the drivers before anything is estimated. */
const register = ({ ctx, stage, as }: Teller, model: DemoModel): string => {
	const { name, purpose, portfolio, uses, materiality, complexity } = model;
	const ref = registerModel(ctx, as(model.owner), {
		name,
		purpose,
		portfolio,
		uses: [...uses],
		materiality,
		complexity
	});
	stage.pass(2);
	const validator = as(model.validator);
	assignValidator(ctx, as('greta'), { model: ref, person: validator.person as PersonId });
	confirmTier(ctx, validator, { model: ref, tier: tierOfModel(ctx, ctx.read, ref).tier });
	declareSigns(ctx, as(model.owner), {
		model: ref,
		drivers: model.drivers.map(({ series, sign, plausible: [low, high], rationale }) => ({
			series,
			sign,
			low,
			high,
			rationale
		}))
	});
	return ref;
};

/** One model from its registration to the first runs, each step through the verbs that a person's click calls. */
export const tell = async (teller: Teller, model: DemoModel): Promise<Told> => {
	const { ctx, stage, as } = teller;
	const owner = as(model.owner);
	const ref = register(teller, model);
	stage.pass(3);
	const { frequency, length } = model.source;
	const from = periodText(
		periodIndex(publishedBy(stage.now(), frequency), frequency)! - length + 1,
		frequency
	);
	const { vintage, to } = await store(teller, { model, ref, from });
	const specification = specificationOf(model, from, to);
	const version = draftVersion(ctx, owner, { model: ref, specification });
	const claimed = await claims(teller, model, version, vintage);
	stage.pass(2);
	reviseDraft(ctx, owner, version, {
		specification: { ...specification, claimed },
		reason: 'The coefficients in use, as the production script prints them.'
	});
	submitVersion(ctx, owner, version);
	await run(teller, owner, { version, vintage, purpose: 'planned' });
	stage.pass(6);
	await run(teller, as(model.validator), { version, vintage, purpose: 'validation' });
	return { model, ref, version, dataset: vintage.split('/')[0]!, from };
};

/** A later vintage, the sample extended to it in a new draft, and an exploratory run of that. */
export const extend = async (teller: Teller, told: Told): Promise<void> => {
	const { ctx, as } = teller;
	const { model, ref, version, from } = told;
	const owner = as(model.owner);
	const { vintage, to } = await store(teller, told);
	const draft = draftVersion(ctx, owner, {
		model: ref,
		specification: specificationOf(model, from, to),
		reason: `The sample extended to ${to}.`,
		predecessor: version
	});
	await run(teller, owner, { version: draft, vintage, purpose: 'exploratory' });
};
