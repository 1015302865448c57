import type { Actor } from '$lib/domain/actor';
import type { VintageInput } from '$lib/domain/lineage-input';
import type { Ctx } from '$lib/server/context';
import { parseUpload } from '$lib/server/lineage/parse';
import type { Preview } from '$lib/server/lineage/upload';
import { registerModel } from '$lib/server/register/model';
import type { Pool } from '$lib/server/runs/pool';
import { modelInput, openBank, type Bank } from '../register/bank';

/** Files are parsed in this thread here; the pool itself has tests of its own. */
const here: Pool = {
	parse: (input) => parseUpload(input),
	compute: () => Promise.reject(new Error('Nothing is computed here.')),
	closed: () => false,
	close: () => Promise.resolve()
};

export interface Desk extends Bank {
	readonly owner: Actor;
	readonly model: string;
}

/** A bank with an owner and one model, as of 2 March 2026. */
export const openDesk = async (): Promise<Desk> => {
	const bank = await openBank({ pool: here });
	const owner = bank.person('Ada Quint', 'owner');
	return { ...bank, owner, model: registerModel(bank.ctx, owner, modelInput()) };
};

export const bytesOf = (text: string): Uint8Array => new TextEncoder().encode(text);

/** Confirms a preview with every column in use, unless told otherwise. */
export const confirmation = (preview: Preview, changed: Partial<VintageInput> = {}): VintageInput => ({
	upload: preview.upload,
	sha256: preview.sha256,
	choices: preview.choices,
	name: 'Losses and drivers',
	vintageDate: '2026-02-15',
	columns: (preview.parsed?.table.columns ?? []).map(({ name }) => ({
		column: name,
		role: 'observed',
		unit: 'per cent',
		source: 'Statistical office',
		code: `X.${name}`,
		seasonal: 'adjusted'
	})),
	...changed
});

/** Types of the entries after a folio, in order. */
export const typesAfter = (ctx: Ctx, seq: number): string[] =>
	ctx.read
		.all<{ type: string }>(
			ctx.read.q.selectFrom('entry').select('type').where('seq', '>', seq).orderBy('seq')
		)
		.map(({ type }) => type);

export const lastFolio = (ctx: Ctx): number =>
	ctx.read.first<{ seq: number }>(ctx.read.q.selectFrom('entry').select((e) => e.fn.max('seq').as('seq')))
		?.seq ?? -1;

export const count = (ctx: Ctx, table: 'blob' | 'upload' | 'vintage'): number =>
	Number(
		ctx.read.first<{ n: number }>(ctx.read.q.selectFrom(table).select((e) => e.fn.countAll().as('n')))?.n
	);
