import type { Actor } from '$lib/domain/actor';
import { Absent, Refused } from '$lib/domain/faults';
import type { Note, ParsedTable } from '$lib/domain/lineage';
import { compareVintages, type VintageComparison } from '$lib/domain/lineage-comparison';
import { integrityFindings } from '$lib/domain/lineage-integrity';
import { parent, part } from '$lib/domain/references';
import type { Ctx } from '../context';
import type { Handle } from '../db/handle';
import {
	datasetByRef,
	datasetsOfModel,
	modelsOfDataset,
	vintageByRef,
	vintagesOfDataset
} from './lineage.queries';
import { allow, may } from '../people/allow';
import { readTable, readVintage, storedVintage, type StoredVintage } from './read';

/** One answer to what does not exist and to what may not be seen. */
const noSuchPage = 'There is no such page.';

/** Whoever may read the data of one model that uses the dataset may read the dataset. */
const requireReading = (ctx: Ctx, handle: Handle, actor: Actor, dataset: string): readonly string[] => {
	const models = handle.all(modelsOfDataset(handle.q, dataset)).map(({ model }) => model);
	if (models.length === 0) throw new Absent(noSuchPage);
	if (!models.some((model) => may(ctx, handle, actor, 'data.read', { model })))
		throw new Refused('S11', 'data.read', noSuchPage, false, dataset);
	return models;
};

export interface DatasetView {
	readonly ref: string;
	readonly name: string;
	/** Models that may use it. */
	readonly models: readonly string[];
	/** Newest first. */
	readonly vintages: readonly StoredVintage[];
}

/** A dataset with its vintages. */
export const datasetView = (ctx: Ctx, actor: Actor, ref: string, handle: Handle = ctx.read): DatasetView => {
	const models = requireReading(ctx, handle, actor, ref);
	const row = handle.first(datasetByRef(handle.q, ref));
	if (!row) throw new Absent(noSuchPage);
	return {
		ref,
		name: row.name,
		models,
		vintages: handle.all(vintagesOfDataset(handle.q, ref)).map((vintage) => storedVintage(handle, vintage))
	};
};

/** Datasets a model may use, each with its vintages. */
export const dataOfModel = (
	ctx: Ctx,
	actor: Actor,
	model: string,
	handle: Handle = ctx.read
): readonly DatasetView[] => {
	allow(ctx, handle, actor, 'data.read', { model });
	return handle.all(datasetsOfModel(handle.q, model)).map(({ ref }) => datasetView(ctx, actor, ref, handle));
};

export interface VintageView {
	readonly vintage: StoredVintage;
	readonly name: string;
	readonly models: readonly string[];
	readonly table: ParsedTable;
	/** What is odd in the figures, computed now. */
	readonly findings: readonly Note[];
	/** The vintage before, and what moved since. */
	readonly before?: {
		readonly ref: string;
		readonly vintageDate: string;
		readonly comparison: VintageComparison;
	};
	/** Lineage that changed since the vintage before: unit, seasonal adjustment, source. */
	readonly changes: readonly Note[];
	readonly last: number;
}

const lineageChanges = (before: StoredVintage, after: StoredVintage): Note[] =>
	after.columns.flatMap((column) => {
		const old = before.columns.find(({ name }) => name === column.name);
		if (!old || column.role === 'left-out') return [];
		const moved = (['unit', 'seasonal', 'source', 'code'] as const).filter(
			(field) => old[field] !== column[field]
		);
		return moved.map((field) => ({
			code: `${field}-changed`,
			message: `${column.name}: ${field === 'seasonal' ? 'seasonal adjustment' : field} was ${old[field] ?? 'not given'} and is ${column[field] ?? 'not given'}.`,
			column: column.name
		}));
	});

/** A vintage with its figures, findings and the comparison with the one before. */
export const vintageView = (ctx: Ctx, actor: Actor, ref: string, handle: Handle = ctx.read): VintageView => {
	if (!handle.first(vintageByRef(handle.q, ref))) throw new Absent(noSuchPage);
	const models = requireReading(ctx, handle, actor, parent(ref));
	const vintage = readVintage(ctx, handle, ref);
	const dataset = handle.first(datasetByRef(handle.q, vintage.dataset))!;
	const table = readTable(ctx, vintage);
	const earlier = vintage.n > 1 ? readVintage(ctx, handle, part(vintage.dataset, vintage.n - 1)) : undefined;
	return {
		vintage,
		name: dataset.name,
		models,
		table,
		findings: integrityFindings(table),
		changes: earlier ? lineageChanges(earlier, vintage) : [],
		last: dataset.vintages,
		...(earlier
			? {
					before: {
						ref: earlier.ref,
						vintageDate: earlier.vintageDate,
						comparison: compareVintages(readTable(ctx, earlier), table)
					}
				}
			: {})
	};
};

/** The exact bytes that were stored, checked against their digest, and the name the file had. */
export const vintageFile = (
	ctx: Ctx,
	actor: Actor,
	ref: string
): {
	readonly bytes: Buffer;
	readonly fileName: string;
	readonly media: 'csv' | 'xlsx';
	readonly sha256: string;
} => {
	requireReading(ctx, ctx.read, actor, parent(ref));
	const row = ctx.read.first(vintageByRef(ctx.read.q, ref));
	if (!row) throw new Absent(noSuchPage);
	const bytes = ctx.blobs.get(row.sha256);
	if (!bytes) throw new Absent('The bytes of this vintage are not in the register.');
	return { bytes, fileName: row.file_name, media: row.media, sha256: row.sha256 };
};
