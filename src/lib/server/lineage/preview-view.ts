import type { Actor } from '$lib/domain/actor';
import type { Choices, Note, SeasonalAdjustment } from '$lib/domain/lineage';
import { integrityFindings } from '$lib/domain/lineage-integrity';
import type { ParsedTable } from '$lib/domain/lineage';
import type { Ctx } from '../context';
import type { SheetName } from './parse';
import { vintagesOfModel, type ColumnLineage, type StoredVintage } from './read';
import { previewUpload, type Preview } from './upload';
import { dataOfModel } from './vintage-view';

/** Figures at both ends of a table, for the eye. */
export interface Glimpse {
	readonly names: readonly string[];
	readonly first: readonly GlimpseRow[];
	readonly last: readonly GlimpseRow[];
	readonly rows: number;
}
interface GlimpseRow {
	readonly period: string;
	readonly values: readonly (number | null)[];
}

/** One column as the form offers it: what is known of it from the vintage before. */
export interface OfferedColumn {
	readonly column: string;
	readonly figures: number;
	readonly from: string;
	readonly to: string;
	readonly unit: string;
	readonly source: string;
	readonly code: string;
	readonly seasonal: SeasonalAdjustment;
	readonly notes: string;
	readonly role: ColumnLineage['role'];
}

export interface PreviewView {
	readonly preview: Omit<Preview, 'parsed'>;
	/** Undefined where the file cannot be read with these choices. */
	readonly table?: {
		readonly how: string;
		readonly frequency: ParsedTable['frequency'];
		readonly from: string;
		readonly to: string;
		readonly observations: number;
		readonly glimpse: Glimpse;
		readonly notes: readonly Note[];
		readonly findings: readonly Note[];
		readonly leftOut: readonly { readonly name: string; readonly sample: string }[];
		readonly columns: readonly OfferedColumn[];
	};
	/** Sheets of a workbook. */
	readonly sheets: readonly SheetName[];
	readonly datasets: readonly { readonly ref: string; readonly name: string; readonly vintages: number }[];
	/** The dataset whose next vintage this seems to be, unless the reader chose. */
	readonly dataset: string;
}

const ends = 4;

export const glimpseOf = (table: ParsedTable): Glimpse => {
	const row = (i: number): GlimpseRow => ({
		period: table.periods[i]!,
		values: table.columns.map(({ values }) => values[i] ?? null)
	});
	const rows = table.periods.map((_, i) => i);
	const short = rows.length <= 2 * ends + 1;
	return {
		names: table.columns.map(({ name }) => name),
		first: (short ? rows : rows.slice(0, ends)).map(row),
		last: (short ? [] : rows.slice(-ends)).map(row),
		rows: rows.length
	};
};

const offered = (table: ParsedTable, known: StoredVintage | undefined): OfferedColumn[] =>
	table.columns.map(({ name, values }) => {
		const before = known?.columns.find((column) => column.name === name);
		const first = values.findIndex((value) => value !== null);
		const last = values.findLastIndex((value) => value !== null);
		return {
			column: name,
			figures: values.filter((value) => value !== null).length,
			from: table.periods[first] ?? '',
			to: table.periods[last] ?? '',
			unit: before?.unit ?? '',
			source: before?.source ?? '',
			code: before?.code ?? '',
			seasonal: before?.seasonal ?? 'unknown',
			notes: before?.notes ?? '',
			role: before?.role ?? (first === -1 ? 'left-out' : 'observed')
		};
	});

/** The newest vintage that names at least half of the columns. */
const likely = (table: ParsedTable, vintages: readonly StoredVintage[]): StoredVintage | undefined =>
	vintages.find(({ columns }) => {
		const names = new Set(columns.map(({ name }) => name));
		return table.columns.filter(({ name }) => names.has(name)).length * 2 >= table.columns.length;
	});

/**
 * A waiting upload as its page shows it: ends of the table, notes and findings, and for each column the lineage of the
 * vintage before. `dataset` is the reader's choice: a reference, `new`, or nothing yet.
 * @throws Absent, Refused
 */
export const previewView = async (
	ctx: Ctx,
	actor: Actor,
	asked: {
		readonly model: string;
		readonly upload: string;
		readonly choices: Choices;
		readonly dataset?: string;
	}
): Promise<PreviewView> => {
	const { parsed, ...preview } = await previewUpload(ctx, actor, asked);
	const datasets = dataOfModel(ctx, actor, asked.model).map(({ ref, name, vintages }) => ({
		ref,
		name,
		vintages: vintages.length
	}));
	const vintages = vintagesOfModel(ctx.read, asked.model);
	const known =
		asked.dataset === undefined
			? parsed && likely(parsed.table, vintages)
			: vintages.find(({ dataset }) => dataset === asked.dataset);
	if (!parsed) return { preview, sheets: [], datasets, dataset: asked.dataset ?? '' };
	const { table, how, leftOut } = parsed;
	return {
		preview,
		sheets: parsed.sheets ?? [],
		datasets,
		dataset: asked.dataset ?? known?.dataset ?? '',
		table: {
			how,
			frequency: table.frequency,
			from: table.periods[0]!,
			to: table.periods.at(-1)!,
			observations: table.periods.length,
			glimpse: glimpseOf(table),
			notes: table.notes,
			findings: integrityFindings(table),
			leftOut,
			columns: offered(table, known)
		}
	};
};
