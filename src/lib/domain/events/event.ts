import type { z } from 'zod';

/** Every version of one event's payload; old ones stay readable for ever. */
export interface EventSchemas<V extends number, S extends Readonly<Record<number, z.ZodType>>> {
	readonly current: V;
	readonly schemas: S;
}

/** Declares an event type: the version written today and the schema of each version ever written. */
export const event = <V extends number, S extends Readonly<Record<number, z.ZodType>> & Record<V, z.ZodType>>(
	current: V,
	schemas: S
): EventSchemas<V, S> => Object.freeze({ current, schemas });
