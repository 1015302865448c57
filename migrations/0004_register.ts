import { sql, type Kysely } from 'kysely';

/** Models, their uses, parties, declared signs and versions. */
export const up = async (db: Kysely<unknown>): Promise<void> => {
	await db.schema
		.createTable('model')
		.addColumn('ref', 'text', (c) => c.primaryKey().notNull())
		.addColumn('name', 'text', (c) => c.notNull())
		.addColumn('purpose', 'text', (c) => c.notNull())
		.addColumn('portfolio', 'text', (c) => c.notNull())
		.addColumn('answers', 'text', (c) => c.notNull().check(sql`json_valid(answers)`))
		.addColumn('tier', 'integer', (c) => c.check(sql`tier >= 1`))
		.addColumn('tier_how', 'text', (c) => c.check(sql`tier_how in ('confirmed', 'overridden')`))
		.addColumn('tier_reason', 'text')
		.addColumn('override_tier', 'integer', (c) => c.check(sql`override_tier >= 1`))
		.addColumn('override_reason', 'text')
		.addColumn('override_by', 'text')
		.addColumn('registered_at', 'text', (c) => c.notNull())
		.addColumn('registered_by', 'text', (c) => c.notNull())
		.addColumn('entry', 'integer', (c) => c.notNull())
		.addCheckConstraint('tier_and_how', sql`(tier is null) = (tier_how is null)`)
		.modifyEnd(sql`strict`)
		.execute();
	await db.schema
		.createTable('model_use')
		.addColumn('model', 'text', (c) => c.notNull().references('model.ref'))
		.addColumn('use', 'text', (c) => c.notNull())
		.addColumn('entry', 'integer', (c) => c.notNull())
		.addPrimaryKeyConstraint('model_use_key', ['model', 'use'])
		.modifyEnd(sql`strict`)
		.execute();
	await db.schema
		.createTable('model_party')
		.addColumn('model', 'text', (c) => c.notNull().references('model.ref'))
		.addColumn('relation', 'text', (c) =>
			c.notNull().check(sql`relation in ('owner', 'developer', 'validator')`)
		)
		.addColumn('person', 'text', (c) => c.notNull())
		.addColumn('from_at', 'text', (c) => c.notNull())
		.addColumn('until_at', 'text')
		.addColumn('entry', 'integer', (c) => c.notNull())
		.addPrimaryKeyConstraint('model_party_key', ['model', 'relation', 'person', 'from_at'])
		.modifyEnd(sql`strict`)
		.execute();
	await db.schema.createIndex('model_party_person').on('model_party').columns(['person', 'model']).execute();
	await db.schema
		.createTable('prior')
		.addColumn('model', 'text', (c) => c.notNull().references('model.ref'))
		.addColumn('n', 'integer', (c) => c.notNull())
		.addColumn('series', 'text', (c) => c.notNull())
		.addColumn('side', 'text', (c) => c.notNull().check(sql`side in ('owner', 'validator')`))
		.addColumn('sign', 'text', (c) => c.notNull().check(sql`sign in ('+', '-', 'any')`))
		.addColumn('low', 'real', (c) => c.notNull())
		.addColumn('high', 'real', (c) => c.notNull())
		.addColumn('rationale', 'text', (c) => c.notNull())
		.addColumn('late', 'integer', (c) => c.notNull().check(sql`late in (0, 1)`))
		.addColumn('at', 'text', (c) => c.notNull())
		.addColumn('by', 'text', (c) => c.notNull())
		.addColumn('entry', 'integer', (c) => c.notNull())
		.addPrimaryKeyConstraint('prior_key', ['model', 'n', 'series'])
		.modifyEnd(sql`strict`)
		.execute();
	await db.schema
		.createTable('version')
		.addColumn('ref', 'text', (c) => c.primaryKey().notNull())
		.addColumn('model', 'text', (c) => c.notNull().references('model.ref'))
		.addColumn('ordinal', 'integer', (c) => c.notNull())
		.addColumn('state', 'text', (c) => c.notNull().check(sql`state in ('draft', 'submitted', 'withdrawn')`))
		.addColumn('specification', 'text', (c) => c.notNull().check(sql`json_valid(specification)`))
		.addColumn('digest', 'text', (c) => c.notNull())
		.addColumn('reason', 'text', (c) => c.notNull())
		.addColumn('predecessor', 'text', (c) => c.references('version.ref'))
		.addColumn('drafted_by', 'text', (c) => c.notNull())
		.addColumn('drafted_at', 'text', (c) => c.notNull())
		.addColumn('revised_at', 'text', (c) => c.notNull())
		.addColumn('submitted_by', 'text')
		.addColumn('submitted_at', 'text')
		.addColumn('withdrawn_at', 'text')
		.addColumn('withdrawn_reason', 'text')
		.addColumn('entry', 'integer', (c) => c.notNull())
		.addUniqueConstraint('version_ordinal', ['model', 'ordinal'])
		.modifyEnd(sql`strict`)
		.execute();
};
