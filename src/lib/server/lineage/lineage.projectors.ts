import { canonical } from '$lib/chain/canonical';
import type { Entry } from '$lib/domain/entry';
import type { Projectors } from '../context';
import type { Tx } from '../db/handle';
import { datasetByRef, seriesById } from './lineage.queries';

type Stored = Entry<'vintage.stored'>;
type StoredColumn = Stored['payload']['columns'][number];

/** The dictionary follows the latest vintage: a changed unit is seen there, and every vintage keeps its own. */
const describeSeries = (tx: Tx, entry: Stored, column: StoredColumn): void => {
	const { series: id, source, code, unit } = column;
	if (id === undefined || source === undefined || unit === undefined) return;
	const described = {
		label: column.name,
		unit,
		seasonal: column.seasonal ?? ('unknown' as const),
		last_vintage: entry.payload.vintage,
		entry: entry.seq
	};
	if (tx.first(seriesById(tx.q, id))) tx.update('series', { id }, described);
	else
		tx.insert('series', {
			id,
			source,
			code: code ?? column.name,
			first_vintage: entry.payload.vintage,
			...described
		});
};

const storeColumn = (tx: Tx, entry: Stored, column: StoredColumn, position: number): void =>
	tx.insert('vintage_column', {
		vintage: entry.payload.vintage,
		position,
		name: column.name,
		role: column.role,
		series: column.series ?? null,
		unit: column.unit ?? null,
		source: column.source ?? null,
		code: column.code ?? null,
		vintage_date: column.vintageDate ?? null,
		seasonal: column.seasonal ?? null,
		notes: column.notes ?? null,
		entry: entry.seq
	});

/** Rows of the lineage room, from its entries alone. */
export const lineageProjectors: Projectors = {
	'dataset.opened': (tx, entry) => {
		const { dataset, model, name } = entry.payload;
		tx.insert('dataset', { ref: dataset, model, name, vintages: 0, entry: entry.seq });
		tx.insert('dataset_model', { dataset, model, entry: entry.seq });
	},
	'dataset.attached': (tx, entry) => {
		const { dataset, model } = entry.payload;
		tx.insert('dataset_model', { dataset, model, entry: entry.seq });
	},
	'vintage.stored': (tx, entry) => {
		const { payload } = entry;
		tx.insert('vintage', {
			ref: payload.vintage,
			dataset: payload.dataset,
			n: payload.n,
			model: payload.model,
			sha256: payload.sha256,
			size: payload.size,
			media: payload.media,
			file_name: payload.fileName,
			vintage_date: payload.vintageDate,
			frequency: payload.frequency,
			period_from: payload.from,
			period_to: payload.to,
			observations: payload.observations,
			table_sha256: payload.table,
			choices: canonical(payload.choices),
			notes: canonical(payload.notes),
			at: entry.at,
			by: entry.actor,
			entry: entry.seq
		});
		payload.columns.forEach((column, position) => {
			describeSeries(tx, entry, column);
			storeColumn(tx, entry, column, position);
		});
		const dataset = tx.first(datasetByRef(tx.q, payload.dataset));
		if (!dataset) throw new Error(`${payload.vintage} belongs to a dataset that was never opened.`);
		tx.update('dataset', { ref: dataset.ref }, { vintages: payload.n, entry: entry.seq });
	}
};
