import type { Actor, PersonId } from '$lib/domain/actor';
import { Absent, Conflict } from '$lib/domain/faults';
import { record } from '$lib/server/log/record';
import { allow } from '$lib/server/people/allow';
import type { Ctx } from '../context';
import { stop } from './execution';
import { runByRef } from './runs.queries';

/** Cancels a run that has not ended; its thread is ended too. @throws Conflict when it ended meanwhile */
export const cancelRun = (ctx: Ctx, actor: Actor, ref: string): void => {
	ctx.write((tx) => {
		const row = tx.first(runByRef(tx.q, ref));
		if (!row) throw new Absent(`There is no run ${ref}.`);
		// Whoever may not read the run is not told that there is one.
		allow(ctx, tx, actor, 'run.read', { model: row.model });
		const starter = row.requested_by as PersonId;
		const grant = allow(ctx, tx, actor, 'run.cancel', { model: row.model, starter });
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
