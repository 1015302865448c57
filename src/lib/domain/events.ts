import type { z } from 'zod';
import { lineageEvents } from './events/lineage';
import { logEvents } from './events/log';
import { peopleEvents } from './events/people';
import { policyEvents } from './events/policy';
import { registerEvents } from './events/register';
import { runsEvents } from './events/runs';

/** The closed list of event types. */
export const events = {
	...logEvents,
	...peopleEvents,
	...policyEvents,
	...registerEvents,
	...lineageEvents,
	...runsEvents
} as const;

type Events = typeof events;
export type EventType = keyof Events & string;

/** The payload of an event as written today. */
export type Payload<T extends EventType> = {
	[K in EventType]: Events[K] extends { current: infer V extends number; schemas: infer S }
		? S extends Record<V, infer Z extends z.ZodType>
			? z.output<Z>
			: never
		: never;
}[T];
