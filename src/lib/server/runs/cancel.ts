import type { Actor, PersonId } from '$lib/domain/actor';
import type { Grant } from '$lib/domain/entry';
import { Absent, Conflict, Refused } from '$lib/domain/faults';
import { record } from '$lib/server/log/record';
import { allow, may } from '$lib/server/people/allow';
import type { Ctx } from '../context';
import type { Tx } from '../db/handle';
import type { Schema } from '../db/schema';
import { stop } from './execution';
import { runByRef } from './runs.queries';

/** @throws Refused, as if there were no such run to whoever may not even read it */
const grantOf = (
	ctx: Ctx,
	tx: Tx,
	actor: Actor,
	{ model, requested_by: starter }: Pick<Schema['run'], 'model' | 'requested_by'>
): Grant => {
	try {
		return allow(ctx, tx, actor, 'run.cancel', { model, starter: starter as PersonId });
	} catch (fault) {
		const unknown = fault instanceof Refused && fault.rule === 'S11';
		if (!unknown || may(ctx, tx, actor, 'run.read', { model })) throw fault;
		throw new Refused(fault.rule, fault.action, fault.message, false, model);
	}
};

/** Cancels a run that has not ended; its thread is ended too. @throws Conflict when it ended meanwhile */
export const cancelRun = (ctx: Ctx, actor: Actor, ref: string): void => {
	ctx.write((tx) => {
		const row = tx.first(runByRef(tx.q, ref));
		if (!row) throw new Absent(`There is no run ${ref}.`);
		const grant = grantOf(ctx, tx, actor, row);
		if (row.state !== 'requested')
			throw new Conflict(`${ref} ${row.state === 'cancelled' ? 'was' : 'has'} ${row.state} already.`);
		record(ctx, tx, actor, grant, {
			type: 'run.cancelled',
			subjects: [row.model, row.version, ref],
			payload: { run: ref }
		});
		tx.remove('run_queue', { run: ref });
	});
	stop(ctx, ref);
};
