import type { LineageSchema } from './schema/lineage';
import type { LogSchema } from './schema/log';
import type { PeopleSchema } from './schema/people';
import type { PolicySchema } from './schema/policy';
import type { RegisterSchema } from './schema/register';
import type { RunsSchema } from './schema/runs';

/** Every table of the register's file. */
export interface Schema
	extends LogSchema, PeopleSchema, PolicySchema, RegisterSchema, LineageSchema, RunsSchema {}
