import { sql, type Kysely } from 'kysely';

/** Runs, and the queue of those not yet computed. */
export const up = async (db: Kysely<unknown>): Promise<void> => {
	await db.schema
		.createTable('run')
		.addColumn('ref', 'text', (c) => c.primaryKey().notNull())
		.addColumn('model', 'text', (c) => c.notNull().references('model.ref'))
		.addColumn('version', 'text', (c) => c.notNull().references('version.ref'))
		.addColumn('vintage', 'text', (c) => c.notNull().references('vintage.ref'))
		.addColumn('file_sha256', 'text', (c) => c.notNull())
		.addColumn('table_sha256', 'text', (c) => c.notNull())
		.addColumn('policy_digest', 'text', (c) => c.notNull())
		.addColumn('tier', 'integer', (c) => c.notNull())
		.addColumn('settings', 'text', (c) => c.notNull().check(sql`json_valid(settings)`))
		.addColumn('seed', 'integer', (c) => c.notNull())
		.addColumn('purpose', 'text', (c) =>
			c.notNull().check(sql`purpose in ('planned', 'validation', 'exploratory')`)
		)
		.addColumn('engine', 'text', (c) => c.notNull())
		.addColumn('request_digest', 'text', (c) => c.notNull())
		.addColumn('requested_by', 'text', (c) => c.notNull())
		.addColumn('requested_at', 'text', (c) => c.notNull())
		.addColumn('state', 'text', (c) =>
			c.notNull().check(sql`state in ('requested', 'finished', 'failed', 'cancelled')`)
		)
		.addColumn('ended_at', 'text')
		.addColumn('result_blob', 'text')
		.addColumn('result_digest', 'text')
		.addColumn('holds', 'integer')
		.addColumn('query', 'integer')
		.addColumn('fails', 'integer')
		.addColumn('not_assessable', 'integer')
		.addColumn('groups', 'text', (c) => c.check(sql`json_valid(groups)`))
		.addColumn('headline', 'text', (c) => c.check(sql`json_valid(headline)`))
		.addColumn('failure', 'text')
		.addColumn('entry', 'integer', (c) => c.notNull())
		.modifyEnd(sql`strict`)
		.execute();
	await db.schema.createIndex('run_model').on('run').column('model').execute();
	await db.schema.createIndex('run_request').on('run').column('request_digest').execute();
	await db.schema.createIndex('run_vintage').on('run').column('vintage').execute();
	await db.schema
		.createTable('run_queue')
		.addColumn('run', 'text', (c) => c.primaryKey().notNull())
		.addColumn('enqueued_at', 'text', (c) => c.notNull())
		.addColumn('attempts', 'integer', (c) => c.notNull())
		.modifyEnd(sql`strict`)
		.execute();
};
