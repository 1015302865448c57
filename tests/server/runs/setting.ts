import type { Actor, PersonId } from '$lib/domain/actor';
import type { Specification } from '$lib/domain/specification';
import { drawNormal, mulberry32 } from '$lib/econometrics/random/mulberry32';
import { confirmVintage } from '$lib/server/lineage/confirm';
import { storeUpload } from '$lib/server/lineage/upload';
import { registerModel } from '$lib/server/register/model';
import { assignValidator } from '$lib/server/register/parties';
import { declareSigns } from '$lib/server/register/signs';
import { draftVersion, submitVersion } from '$lib/server/register/version';
import type { Pool } from '$lib/server/runs/pool';
import { lossOnUnemployment } from '../../domain/specification-example';
import { modelInput, openBank, unemploymentUp, type Bank } from '../register/bank';

/** Loss rate and unemployment that error-correct with speed 0.3 to 0.9 + 0.5 unemployment, 2000-Q1 to 2019-Q4. */
export const lossFile = (seed = 11): string => {
	const next = mulberry32(seed);
	let [unemp, loss] = [6, 3.9];
	const rows = Array.from({ length: 80 }, (_, i) => {
		const gap = loss - 0.9 - 0.5 * unemp;
		const step = 0.25 * drawNormal(next);
		unemp += step;
		loss += -0.3 * gap + 0.2 * step + 0.03 * drawNormal(next);
		return `${2000 + Math.floor(i / 4)}-Q${(i % 4) + 1},${loss.toFixed(4)},${unemp.toFixed(4)}`;
	});
	return `period,loss,unemp\n${rows.join('\n')}\n`;
};

export interface Setting {
	readonly bank: Bank;
	readonly owner: Actor;
	readonly validator: Actor;
	readonly head: Actor;
	readonly model: string;
	readonly version: string;
	readonly vintage: string;
}

/** Stores a file for the model through the doors a person uses. */
export const storeVintage = async (
	bank: Bank,
	owner: Actor,
	model: string,
	text: string
): Promise<string> => {
	const preview = await storeUpload(bank.ctx, owner, {
		model,
		bytes: Buffer.from(text),
		fileName: 'loss.csv'
	});
	return confirmVintage(bank.ctx, owner, model, {
		upload: preview.upload,
		sha256: preview.sha256,
		name: 'Losses and unemployment',
		vintageDate: '2026-02-27',
		columns: ['loss', 'unemp'].map((column) => ({
			column,
			role: 'observed' as const,
			unit: '%',
			source: 'invented for this test'
		}))
	});
};

/** A bank with one model: signs declared, a version submitted, a vintage stored, a validator assigned. */
export const openSetting = async (
	pool: Pool,
	specification: Partial<Specification> = {}
): Promise<Setting> => {
	const bank = await openBank({ pool });
	const owner = bank.person('T. Halvar', 'owner');
	const validator = bank.person('I. Marrow', 'validator');
	const head = bank.person('G. Ostrom', 'head');
	const { ctx } = bank;
	const model = registerModel(ctx, owner, modelInput());
	assignValidator(ctx, head, { model, person: validator.person as PersonId });
	declareSigns(ctx, owner, { model, drivers: [unemploymentUp] });
	const version = draftVersion(ctx, owner, { model, specification: lossOnUnemployment(specification) });
	submitVersion(ctx, owner, version);
	const vintage = await storeVintage(bank, owner, model, lossFile());
	return { bank, owner, validator, head, model, version, vintage };
};
