import type { Kysely } from 'kysely';
import type { Schema } from '../db/schema';

type Q = Kysely<Schema>;

export const datasetByRef = (q: Q, ref: string) => q.selectFrom('dataset').selectAll().where('ref', '=', ref);

export const countDatasets = (q: Q) => q.selectFrom('dataset').select((e) => e.fn.countAll<number>().as('n'));

/** Datasets that a model may use, in order of opening. */
export const datasetsOfModel = (q: Q, model: string) =>
	q
		.selectFrom('dataset')
		.innerJoin('dataset_model', 'dataset_model.dataset', 'dataset.ref')
		.select(['dataset.ref', 'dataset.model', 'dataset.name', 'dataset.vintages'])
		.where('dataset_model.model', '=', model)
		.orderBy('dataset.ref');

export const modelsOfDataset = (q: Q, dataset: string) =>
	q.selectFrom('dataset_model').select('model').where('dataset', '=', dataset).orderBy('model');

export const attachment = (q: Q, dataset: string, model: string) =>
	q.selectFrom('dataset_model').select('entry').where('dataset', '=', dataset).where('model', '=', model);

export const vintageByRef = (q: Q, ref: string) => q.selectFrom('vintage').selectAll().where('ref', '=', ref);

/** Vintages of a dataset, the newest first. */
export const vintagesOfDataset = (q: Q, dataset: string) =>
	q.selectFrom('vintage').selectAll().where('dataset', '=', dataset).orderBy('n', 'desc');

/** Vintages of every dataset a model may use, the newest first. */
export const vintagesForModel = (q: Q, model: string) =>
	q
		.selectFrom('vintage')
		.innerJoin('dataset_model', 'dataset_model.dataset', 'vintage.dataset')
		.selectAll('vintage')
		.where('dataset_model.model', '=', model)
		.orderBy('vintage.at', 'desc')
		.orderBy('vintage.ref', 'desc');

/** A vintage with the same bytes among the datasets that a model may use. */
export const vintageOfBytes = (q: Q, sha256: string, model: string) =>
	q
		.selectFrom('vintage')
		.innerJoin('dataset_model', 'dataset_model.dataset', 'vintage.dataset')
		.select('vintage.ref')
		.where('vintage.sha256', '=', sha256)
		.where('dataset_model.model', '=', model)
		.orderBy('vintage.ref');

export const columnsOfVintage = (q: Q, vintage: string) =>
	q.selectFrom('vintage_column').selectAll().where('vintage', '=', vintage).orderBy('position');

export const seriesById = (q: Q, id: string) => q.selectFrom('series').selectAll().where('id', '=', id);

export const allSeries = (q: Q) => q.selectFrom('series').selectAll().orderBy('source').orderBy('code');

/** Where each series is used: the vintages that carry it and the models that may use them. */
export const usesOfSeries = (q: Q) =>
	q
		.selectFrom('vintage_column')
		.innerJoin('vintage', 'vintage.ref', 'vintage_column.vintage')
		.innerJoin('dataset_model', 'dataset_model.dataset', 'vintage.dataset')
		.select([
			'vintage_column.series',
			'vintage_column.vintage',
			'vintage_column.name',
			'vintage.dataset',
			'vintage.vintage_date',
			'dataset_model.model'
		])
		.where('vintage_column.series', 'is not', null)
		.orderBy('vintage.at');

export const uploadById = (q: Q, id: string) => q.selectFrom('upload').selectAll().where('id', '=', id);

export const expiredUploads = (q: Q, now: string) => q.deleteFrom('upload').where('expires_at', '<=', now);

/** Bytes that a person's waiting uploads hold. */
export const waitingBytes = (q: Q, person: string) =>
	q
		.selectFrom('upload')
		.select((e) => e.fn.coalesce(e.fn.sum<number>('size'), e.lit(0)).as('n'))
		.where('person', '=', person);
