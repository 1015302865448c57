import { sql, type Kysely } from 'kysely';

const seasonal = sql`seasonal in ('none', 'adjusted', 'unadjusted', 'unknown')`;

/** Datasets, their vintages and columns, the series dictionary, uploads that wait. */
export const up = async (db: Kysely<unknown>): Promise<void> => {
	await db.schema
		.createTable('dataset')
		.addColumn('ref', 'text', (c) => c.primaryKey().notNull())
		.addColumn('model', 'text', (c) => c.notNull().references('model.ref'))
		.addColumn('name', 'text', (c) => c.notNull())
		.addColumn('vintages', 'integer', (c) => c.notNull())
		.addColumn('entry', 'integer', (c) => c.notNull())
		.modifyEnd(sql`strict`)
		.execute();
	await db.schema
		.createTable('dataset_model')
		.addColumn('dataset', 'text', (c) => c.notNull().references('dataset.ref'))
		.addColumn('model', 'text', (c) => c.notNull().references('model.ref'))
		.addColumn('entry', 'integer', (c) => c.notNull())
		.addPrimaryKeyConstraint('dataset_model_key', ['dataset', 'model'])
		.modifyEnd(sql`strict`)
		.execute();
	await db.schema
		.createIndex('dataset_model_model')
		.on('dataset_model')
		.columns(['model', 'dataset'])
		.execute();
	await db.schema
		.createTable('vintage')
		.addColumn('ref', 'text', (c) => c.primaryKey().notNull())
		.addColumn('dataset', 'text', (c) => c.notNull().references('dataset.ref'))
		.addColumn('n', 'integer', (c) => c.notNull().check(sql`n >= 1`))
		.addColumn('model', 'text', (c) => c.notNull().references('model.ref'))
		.addColumn('sha256', 'text', (c) => c.notNull())
		.addColumn('size', 'integer', (c) => c.notNull())
		.addColumn('media', 'text', (c) => c.notNull().check(sql`media in ('csv', 'xlsx')`))
		.addColumn('file_name', 'text', (c) => c.notNull())
		.addColumn('vintage_date', 'text', (c) => c.notNull())
		.addColumn('frequency', 'text', (c) =>
			c.notNull().check(sql`frequency in ('annual', 'quarterly', 'monthly')`)
		)
		.addColumn('period_from', 'text', (c) => c.notNull())
		.addColumn('period_to', 'text', (c) => c.notNull())
		.addColumn('observations', 'integer', (c) => c.notNull())
		.addColumn('table_sha256', 'text', (c) => c.notNull())
		.addColumn('choices', 'text', (c) => c.notNull().check(sql`json_valid(choices)`))
		.addColumn('notes', 'text', (c) => c.notNull().check(sql`json_valid(notes)`))
		.addColumn('at', 'text', (c) => c.notNull())
		.addColumn('by', 'text', (c) => c.notNull())
		.addColumn('entry', 'integer', (c) => c.notNull())
		.addUniqueConstraint('vintage_ordinal', ['dataset', 'n'])
		.modifyEnd(sql`strict`)
		.execute();
	await db.schema.createIndex('vintage_sha256').on('vintage').column('sha256').execute();
	await db.schema
		.createTable('vintage_column')
		.addColumn('vintage', 'text', (c) => c.notNull().references('vintage.ref'))
		.addColumn('position', 'integer', (c) => c.notNull())
		.addColumn('name', 'text', (c) => c.notNull())
		.addColumn('role', 'text', (c) => c.notNull().check(sql`role in ('observed', 'scenario', 'left-out')`))
		.addColumn('series', 'text', (c) => c.references('series.id'))
		.addColumn('unit', 'text')
		.addColumn('source', 'text')
		.addColumn('code', 'text')
		.addColumn('vintage_date', 'text')
		.addColumn('seasonal', 'text', (c) => c.check(seasonal))
		.addColumn('notes', 'text')
		.addColumn('entry', 'integer', (c) => c.notNull())
		.addPrimaryKeyConstraint('vintage_column_key', ['vintage', 'position'])
		.modifyEnd(sql`strict`)
		.execute();
	await db.schema.createIndex('vintage_column_series').on('vintage_column').column('series').execute();
	await db.schema
		.createTable('series')
		.addColumn('id', 'text', (c) => c.primaryKey().notNull())
		.addColumn('source', 'text', (c) => c.notNull())
		.addColumn('code', 'text', (c) => c.notNull())
		.addColumn('label', 'text', (c) => c.notNull())
		.addColumn('unit', 'text', (c) => c.notNull())
		.addColumn('seasonal', 'text', (c) => c.notNull().check(seasonal))
		.addColumn('first_vintage', 'text', (c) => c.notNull())
		.addColumn('last_vintage', 'text', (c) => c.notNull())
		.addColumn('entry', 'integer', (c) => c.notNull())
		.modifyEnd(sql`strict`)
		.execute();
	await db.schema
		.createTable('upload')
		.addColumn('id', 'text', (c) => c.primaryKey().notNull())
		.addColumn('person', 'text', (c) => c.notNull())
		.addColumn('model', 'text', (c) => c.notNull())
		.addColumn('sha256', 'text', (c) => c.notNull())
		.addColumn('size', 'integer', (c) => c.notNull())
		.addColumn('bytes', 'blob', (c) => c.notNull())
		.addColumn('file_name', 'text', (c) => c.notNull())
		.addColumn('at', 'text', (c) => c.notNull())
		.addColumn('expires_at', 'text', (c) => c.notNull())
		.modifyEnd(sql`strict`)
		.execute();
	await db.schema.createIndex('upload_person').on('upload').column('person').execute();
};
