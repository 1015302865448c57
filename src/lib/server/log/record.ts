import type { Actor, PersonId } from '$lib/domain/actor';
import type { Entry, Grant, StepUp } from '$lib/domain/entry';
import { events, type EventType, type Payload } from '$lib/domain/events';
import { Invalid } from '$lib/domain/faults';
import type { z } from 'zod';
import type { Tx } from '../db/handle';
import type { Log } from './log';

/** One change of the register, as a verb says it. */
export interface Event<T extends EventType> {
	readonly type: T;
	/** References of what it is about: 1 to 64, order and repetition do not matter. */
	readonly subjects: readonly string[];
	readonly payload: Payload<T>;
	/** The fresh passkey assertion, for the acts that need one. */
	readonly stepUp?: StepUp;
	/** The person acted for under a delegation. */
	readonly behalf?: PersonId;
}

/** The schema of an event type's payload at a version, or undefined when this release knows none. */
export const payloadSchema = (type: string, version: number): z.ZodType | undefined => {
	if (!Object.hasOwn(events, type)) return undefined;
	const { schemas } = events[type as EventType] as { schemas: Readonly<Record<number, z.ZodType>> };
	return Object.hasOwn(schemas, version) ? schemas[version] : undefined;
};

const pointerOf = (path: readonly PropertyKey[]): string =>
	['/payload', ...path.map((part) => String(part).replaceAll('~', '~0').replaceAll('/', '~1'))].join('/');

/**
 * Appends an entry and projects it, inside `ctx.write`: the only way register state changes. The caller has authorised
 * the act; `grant` is the answer of the permission table.
 * @throws Invalid when the payload does not fit its schema or breaks a rule or limit of entries.
 */
export const record = <T extends EventType>(
	ctx: { readonly log: Pick<Log, 'append'> },
	tx: Tx,
	actor: Actor,
	grant: Grant,
	event: Event<T>
): Entry<T> => {
	const v: number = events[event.type].current;
	const parsed = payloadSchema(event.type, v)!.safeParse(event.payload);
	if (!parsed.success)
		throw new Invalid(
			parsed.error.issues.map(({ path, message }) => ({ pointer: pointerOf(path), message }))
		);
	return ctx.log.append(tx, {
		type: event.type,
		v,
		actor: actor.person,
		...(event.behalf && { behalf: event.behalf }),
		subjects: event.subjects,
		payload: parsed.data as Payload<T>,
		auth: {
			...grant,
			means: actor.means,
			...(actor.token !== undefined && { token: actor.token }),
			...(event.stepUp && { stepUp: event.stepUp })
		},
		request: actor.request
	});
};
