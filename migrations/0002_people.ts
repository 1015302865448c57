import { sql, type Kysely } from 'kysely';

/** Projected tables of people and credentials. */
const projected = async (db: Kysely<unknown>): Promise<void> => {
	await db.schema
		.createTable('person_state')
		.addColumn('person', 'text', (c) => c.primaryKey().notNull())
		.addColumn('state', 'text', (c) => c.notNull().check(sql`state in ('invited', 'enrolled', 'disabled')`))
		.addColumn('since', 'text', (c) => c.notNull())
		.addColumn('identity', 'text')
		.addColumn('recovered_at', 'text')
		.addColumn('entry', 'integer', (c) => c.notNull())
		.modifyEnd(sql`strict`)
		.execute();
	await db.schema
		.createTable('role_grant')
		.addColumn('person', 'text', (c) => c.notNull().references('person_state.person'))
		.addColumn('role', 'text', (c) => c.notNull())
		.addColumn('from_at', 'text', (c) => c.notNull())
		.addColumn('until_at', 'text')
		.addColumn('granted_by', 'text', (c) => c.notNull())
		.addColumn('entry', 'integer', (c) => c.notNull())
		.addPrimaryKeyConstraint('role_grant_key', ['person', 'role', 'from_at'])
		.modifyEnd(sql`strict`)
		.execute();
	await db.schema
		.createTable('grant_proposal')
		.addColumn('seq', 'integer', (c) => c.primaryKey().notNull())
		.addColumn('act', 'text', (c) => c.notNull())
		.addColumn('person', 'text', (c) => c.notNull().references('person_state.person'))
		.addColumn('role', 'text')
		.addColumn('from_at', 'text')
		.addColumn('by', 'text', (c) => c.notNull())
		.addColumn('statement', 'text', (c) => c.notNull())
		.addColumn('expires_at', 'text', (c) => c.notNull())
		.addColumn('outcome', 'text')
		.addColumn('entry', 'integer', (c) => c.notNull())
		.modifyEnd(sql`strict`)
		.execute();
	await db.schema
		.createTable('credential')
		.addColumn('id', 'text', (c) => c.primaryKey().notNull())
		.addColumn('person', 'text', (c) => c.notNull().references('person_state.person'))
		.addColumn('kind', 'text', (c) => c.notNull().check(sql`kind in ('passkey', 'seat')`))
		.addColumn('public_key', 'text', (c) => c.notNull().unique())
		.addColumn('algorithm', 'integer', (c) => c.notNull())
		.addColumn('handle', 'text', (c) => c.notNull())
		.addColumn('backup_eligible', 'integer', (c) => c.notNull())
		.addColumn('aaguid', 'text', (c) => c.notNull())
		.addColumn('transports', 'text', (c) => c.notNull())
		.addColumn('enrolled_at', 'text', (c) => c.notNull())
		.addColumn('revoked_at', 'text')
		.addColumn('counter_fell_at', 'text')
		.addColumn('entry', 'integer', (c) => c.notNull())
		.modifyEnd(sql`strict`)
		.execute();
	await db.schema
		.createTable('token')
		.addColumn('id', 'text', (c) => c.primaryKey().notNull())
		.addColumn('person', 'text', (c) => c.notNull().references('person_state.person'))
		.addColumn('scopes', 'text', (c) => c.notNull())
		.addColumn('created_at', 'text', (c) => c.notNull())
		.addColumn('expires_at', 'text', (c) => c.notNull())
		.addColumn('revoked_at', 'text')
		.addColumn('entry', 'integer', (c) => c.notNull())
		.modifyEnd(sql`strict`)
		.execute();
};

/** The directory: names, which can be erased without touching the log. */
const directory = async (db: Kysely<unknown>): Promise<void> => {
	await db.schema
		.createTable('person')
		.addColumn('id', 'text', (c) => c.primaryKey().notNull())
		.addColumn('name', 'text', (c) => c.notNull())
		.addColumn('mail', 'text', (c) => c.notNull())
		.addColumn('staff_number', 'text', (c) => c.notNull())
		.addColumn('salt', 'blob', (c) => c.notNull())
		.addColumn('handle', 'blob', (c) => c.notNull())
		.modifyEnd(sql`strict`)
		.execute();
	// One account an address; a person not yet named has none.
	await sql`create unique index person_mail on person (lower(mail)) where mail <> ''`.execute(db);
	await db.schema
		.createTable('person_name')
		.addColumn('person', 'text', (c) => c.notNull().references('person.id'))
		.addColumn('name', 'text', (c) => c.notNull())
		.addColumn('from_at', 'text', (c) => c.notNull())
		.addColumn('until_at', 'text')
		.addPrimaryKeyConstraint('person_name_key', ['person', 'from_at'])
		.modifyEnd(sql`strict`)
		.execute();
};

/** Secrets, as digests only, and what is in motion. */
const secrets = async (db: Kysely<unknown>): Promise<void> => {
	await db.schema
		.createTable('session')
		.addColumn('hash', 'text', (c) => c.primaryKey().notNull())
		.addColumn('label', 'text', (c) => c.notNull().unique())
		.addColumn('person', 'text', (c) => c.notNull())
		.addColumn('means', 'text', (c) => c.notNull())
		.addColumn('idle', 'integer', (c) => c.notNull())
		.addColumn('absolute', 'integer', (c) => c.notNull())
		.addColumn('created_at', 'text', (c) => c.notNull())
		.addColumn('seen_at', 'text', (c) => c.notNull())
		.addColumn('agent', 'text', (c) => c.notNull())
		.modifyEnd(sql`strict`)
		.execute();
	await db.schema.createIndex('session_person').on('session').column('person').execute();
	await db.schema
		.createTable('challenge')
		.addColumn('hash', 'text', (c) => c.primaryKey().notNull())
		.addColumn('kind', 'text', (c) => c.notNull().check(sql`kind in ('enrol', 'sign-in', 'step-up')`))
		.addColumn('holder', 'text', (c) => c.notNull())
		.addColumn('person', 'text')
		.addColumn('statement', 'text')
		.addColumn('payload', 'text')
		.addColumn('expires_at', 'text', (c) => c.notNull())
		.modifyEnd(sql`strict`)
		.execute();
	await db.schema
		.createTable('credential_use')
		.addColumn('id', 'text', (c) => c.primaryKey().notNull())
		.addColumn('counter', 'integer', (c) => c.notNull())
		.addColumn('used_at', 'text')
		.modifyEnd(sql`strict`)
		.execute();
	await db.schema
		.createTable('seat_key')
		.addColumn('person', 'text', (c) => c.primaryKey().notNull())
		.addColumn('credential', 'text', (c) => c.notNull())
		.addColumn('key', 'text', (c) => c.notNull())
		.modifyEnd(sql`strict`)
		.execute();
	await db.schema
		.createTable('password')
		.addColumn('person', 'text', (c) => c.primaryKey().notNull())
		.addColumn('hash', 'text', (c) => c.notNull())
		.addColumn('set_at', 'text', (c) => c.notNull())
		.modifyEnd(sql`strict`)
		.execute();
	await db.schema
		.createTable('recovery_code')
		.addColumn('person', 'text', (c) => c.notNull())
		.addColumn('hash', 'text', (c) => c.primaryKey().notNull())
		.addColumn('salt', 'blob', (c) => c.notNull())
		.addColumn('used_at', 'text')
		.modifyEnd(sql`strict`)
		.execute();
	await db.schema.createIndex('recovery_code_person').on('recovery_code').column('person').execute();
	await db.schema
		.createTable('enrolment_link')
		.addColumn('hash', 'text', (c) => c.primaryKey().notNull())
		.addColumn('person', 'text', (c) => c.notNull())
		.addColumn('kind', 'text', (c) => c.notNull())
		.addColumn('expires_at', 'text', (c) => c.notNull())
		.addColumn('used_at', 'text')
		.modifyEnd(sql`strict`)
		.execute();
	await db.schema
		.createTable('token_secret')
		.addColumn('id', 'text', (c) => c.primaryKey().notNull())
		.addColumn('hash', 'text', (c) => c.notNull())
		.addColumn('label', 'text', (c) => c.notNull())
		.addColumn('used_at', 'text')
		.modifyEnd(sql`strict`)
		.execute();
};

export const up = async (db: Kysely<unknown>): Promise<void> => {
	await projected(db);
	await directory(db);
	await secrets(db);
};
