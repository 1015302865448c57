import { system, type Actor, type PersonId } from '$lib/domain/actor';
import type { Failure } from '$lib/domain/events/people';
import type { Refused } from '$lib/domain/faults';
import type { Ctx } from '$lib/server/context';
import { record } from '$lib/server/log/record';

/** What was entered in the minute that runs: a stranger must not fill the log. */
interface Recent {
	minute: number;
	readonly keys: Set<string>;
}

const recent = new WeakMap<Ctx, Recent>();

/** True the first time a key is met within a minute of the register's clock. */
const firstInMinute = (ctx: Ctx, key: string): boolean => {
	const minute = Math.floor(ctx.now().getTime() / 60_000);
	let seen = recent.get(ctx);
	if (!seen || seen.minute !== minute) recent.set(ctx, (seen = { minute, keys: new Set() }));
	if (seen.keys.has(key)) return false;
	seen.keys.add(key);
	return true;
};

/** Enters a refusal: one for each person, rule and minute. Not inside a transaction. */
export const recordRefusal = (ctx: Ctx, actor: Actor, { rule, action, subject }: Refused): void => {
	if (!firstInMinute(ctx, `${actor.person} ${rule}`)) return;
	ctx.write((tx) =>
		record(
			ctx,
			tx,
			actor,
			{ rule },
			{
				type: 'access.refused',
				subjects: [actor.person, ...(subject === undefined ? [] : [subject])],
				payload: { action, rule, ...(subject === undefined ? {} : { subject }) }
			}
		)
	);
};

/** Enters a failed sign-in, without what was typed: one for each way, reason, person and minute. */
export const recordFailure = (
	ctx: Ctx,
	request: string,
	way: 'passkey' | 'recovery' | 'seat',
	reason: Failure,
	person?: PersonId
): void => {
	if (!firstInMinute(ctx, `${way} ${reason} ${person ?? 'unknown'}`)) return;
	ctx.write((tx) =>
		record(
			ctx,
			tx,
			system(request),
			{ rule: 'door' },
			{
				type: 'sign-in.failed',
				subjects: [person ?? 'register'],
				payload: { way, reason, ...(person === undefined ? {} : { person }) }
			}
		)
	);
};
