import { Absent } from '$lib/domain/faults';
import type { ColumnRole, Note, ParsedTable, SeasonalAdjustment } from '$lib/domain/lineage';
import type { Frequency } from '$lib/domain/period';
import type { Ctx } from '../context';
import type { Handle } from '../db/handle';
import type { Schema } from '../db/schema';
import { attachment, columnsOfVintage, vintageByRef, vintagesForModel } from './lineage.queries';

/** Where the figures of a stored column come from. */
export interface ColumnLineage {
	readonly name: string;
	readonly role: ColumnRole;
	readonly series?: string;
	readonly unit?: string;
	readonly source?: string;
	readonly code?: string;
	readonly vintageDate?: string;
	readonly seasonal?: SeasonalAdjustment;
	readonly notes?: string;
}

export interface StoredVintage {
	readonly ref: string;
	readonly dataset: string;
	readonly n: number;
	/** The model it was stored for. */
	readonly model: string;
	/** Digest of the exact bytes of the file. */
	readonly sha256: string;
	/** Digest of the canonical table read from it: what a run depends on. */
	readonly table: string;
	readonly size: number;
	readonly media: 'csv' | 'xlsx';
	readonly fileName: string;
	readonly vintageDate: string;
	readonly frequency: Frequency;
	readonly from: string;
	readonly to: string;
	readonly observations: number;
	readonly columns: readonly ColumnLineage[];
	readonly notes: readonly Note[];
	readonly at: string;
	readonly by: string;
	readonly entry: number;
}

/** A row without its nulls: absent means absent. */
const present = <T extends object>(row: T): { [K in keyof T]?: Exclude<T[K], null> } =>
	Object.fromEntries(Object.entries(row).filter(([, value]) => value !== null)) as {
		[K in keyof T]?: Exclude<T[K], null>;
	};

const columnLineage = (row: Schema['vintage_column']): ColumnLineage => ({
	name: row.name,
	role: row.role,
	...present({
		series: row.series,
		unit: row.unit,
		source: row.source,
		code: row.code,
		vintageDate: row.vintage_date,
		seasonal: row.seasonal,
		notes: row.notes
	})
});

export const storedVintage = (handle: Handle, row: Schema['vintage']): StoredVintage =>
	Object.freeze({
		ref: row.ref,
		dataset: row.dataset,
		n: row.n,
		model: row.model,
		sha256: row.sha256,
		table: row.table_sha256,
		size: row.size,
		media: row.media,
		fileName: row.file_name,
		vintageDate: row.vintage_date,
		frequency: row.frequency,
		from: row.period_from,
		to: row.period_to,
		observations: row.observations,
		columns: handle.all(columnsOfVintage(handle.q, row.ref)).map(columnLineage),
		notes: JSON.parse(row.notes) as readonly Note[],
		at: row.at,
		by: row.by,
		entry: row.entry
	});

/**
 * A stored vintage with the lineage of its columns. Asks no permission: the calling verb has checked its model.
 * @throws Absent
 */
export const readVintage = (_ctx: Ctx, handle: Handle, ref: string): StoredVintage => {
	const row = handle.first(vintageByRef(handle.q, ref));
	if (!row) throw new Absent(`There is no vintage ${ref}.`);
	return storedVintage(handle, row);
};

/**
 * The table that was read from a vintage's file when it was stored. It is not read again: a later release of the parser
 * cannot change old figures.
 */
export const readTable = (ctx: Ctx, vintage: { readonly table: string }): ParsedTable => {
	const bytes = ctx.blobs.get(vintage.table);
	if (!bytes) throw new Absent('The table of this vintage is not in the register.');
	return JSON.parse(bytes.toString('utf8')) as ParsedTable;
};

/** Vintages that a model may use, the newest first. Asks no permission. */
export const vintagesOfModel = (handle: Handle, model: string): readonly StoredVintage[] =>
	handle.all(vintagesForModel(handle.q, model)).map((row) => storedVintage(handle, row));

/** Whether a dataset was opened for the model or attached to it. */
export const modelMayUse = (handle: Handle, model: string, dataset: string): boolean =>
	handle.first(attachment(handle.q, dataset, model)) !== undefined;
