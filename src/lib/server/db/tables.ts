/**
 * Every table stands in exactly one of three lists; a test compares them with the schema.
 * The log is append-only; projected tables are functions of the log and change only beside a fresh entry;
 * the rest lies outside the log (secrets, names, queues).
 */
export const logTables = [
	'entry',
	'entry_subject',
	'node',
	'checkpoint',
	'blob',
	'log_head',
	'current_entry',
	'never'
] as const;

export const projectedTables = [
	// people
	'person_state',
	'role_grant',
	'grant_proposal',
	'credential',
	'token',
	// policy
	'policy',
	'policy_proposal',
	// register
	'model',
	'model_use',
	'model_party',
	'prior',
	'version',
	// lineage
	'dataset',
	'dataset_model',
	'vintage',
	'vintage_column',
	'series',
	// runs
	'run',
	// log: last, so that a difference is named in the table where it lies
	'entry_change'
] as const;

export const outsideTables = [
	'person',
	'person_name',
	'session',
	'challenge',
	'credential_use',
	'seat_key',
	'password',
	'recovery_code',
	'enrolment_link',
	'token_secret',
	'upload',
	'run_queue',
	'kysely_migration',
	'kysely_migration_lock'
] as const;

export type ProjectedTable = (typeof projectedTables)[number];
