import type { Actor } from '$lib/domain/actor';
import { Absent, Conflict } from '$lib/domain/faults';
import type { Ctx } from '../context';
import { record } from '../log/record';
import { allow } from '../people/allow';
import { datasetByRef } from './lineage.queries';
import { modelMayUse } from './read';

/**
 * Lets a model use a dataset that was opened for another: figures are stored once and used by several models.
 * A dataset that does not exist is answered like one the actor may not see.
 * The actor must be allowed to read the data and to store data for the model.
 * @throws Absent, Refused, Conflict when it is attached already
 */
export const attachDataset = (
	ctx: Ctx,
	actor: Actor,
	asked: { readonly model: string; readonly dataset: string }
): void =>
	ctx.write((tx) => {
		const { model, dataset } = asked;
		const grant = allow(ctx, tx, actor, 'dataset.store', { model });
		const row = tx.first(datasetByRef(tx.q, dataset));
		if (!row) throw new Absent('There is no such page.');
		allow(ctx, tx, actor, 'data.read', { model: row.model });
		if (modelMayUse(tx, model, dataset)) throw new Conflict(`${model} uses ${dataset} already.`);
		record(ctx, tx, actor, grant, {
			type: 'dataset.attached',
			subjects: [model, dataset],
			payload: { dataset, model }
		});
	});
