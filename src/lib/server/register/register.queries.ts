import type { Kysely } from 'kysely';
import type { Schema } from '$lib/server/db/schema';

type Q = Kysely<Schema>;

export const modelByRef = (q: Q, ref: string) => q.selectFrom('model').selectAll().where('ref', '=', ref);

export const allModels = (q: Q) => q.selectFrom('model').selectAll().orderBy('ref');

export const countModels = (q: Q) => q.selectFrom('model').select((e) => e.fn.countAll<number>().as('n'));

export const usesOf = (q: Q, model: string) =>
	q.selectFrom('model_use').select('use').where('model', '=', model).orderBy('use');

export const allUses = (q: Q) => q.selectFrom('model_use').select(['model', 'use']).orderBy('use');

/** Every relation to a model there is or was, oldest first. */
export const partiesEver = (q: Q, model: string) =>
	q.selectFrom('model_party').selectAll().where('model', '=', model).orderBy('from_at').orderBy('person');

/** Relations in force now: ended rows carry the instant they ended at. */
export const partiesNow = (q: Q, model: string) =>
	q.selectFrom('model_party').selectAll().where('model', '=', model).where('until_at', 'is', null);

export const allPartiesNow = (q: Q) =>
	q
		.selectFrom('model_party')
		.select(['model', 'relation', 'person'])
		.where('until_at', 'is', null)
		.orderBy('from_at')
		.orderBy('person');

export const partiesOfPerson = (q: Q, person: string) =>
	q
		.selectFrom('model_party')
		.select(['model', 'relation'])
		.where('person', '=', person)
		.where('until_at', 'is', null)
		.orderBy('model')
		.orderBy('relation');

/** Who acted on the model's content since an instant, by the types of their entries. */
export const actorsSince = (q: Q, model: string, types: readonly string[], since: string) =>
	q
		.selectFrom('entry_subject')
		.innerJoin('entry', 'entry.seq', 'entry_subject.seq')
		.select('entry.actor as actor')
		.distinct()
		.where('entry_subject.ref', '=', model)
		.where('entry.at', '>=', since)
		.where('entry.type', 'in', [...types]);

/** Who requested a planned run of the model since an instant. */
export const plannedRunnersSince = (q: Q, model: string, since: string) =>
	q
		.selectFrom('run')
		.select('requested_by as actor')
		.distinct()
		.where('model', '=', model)
		.where('purpose', '=', 'planned')
		.where('requested_at', '>=', since);

export const lastFolio = (q: Q) => q.selectFrom('entry').select((e) => e.fn.max('seq').as('seq'));

export const entriesOfType = (q: Q, model: string, types: readonly string[]) =>
	q
		.selectFrom('entry_subject')
		.innerJoin('entry', 'entry.seq', 'entry_subject.seq')
		.select([
			'entry.seq as seq',
			'entry.at as at',
			'entry.actor as actor',
			'entry.type as type',
			'entry.body as body'
		])
		.where('entry_subject.ref', '=', model)
		.where('entry.type', 'in', [...types])
		.orderBy('entry.seq');

/** Every declaration of signs, oldest first. */
export const priorsOf = (q: Q, model: string) =>
	q.selectFrom('prior').selectAll().where('model', '=', model).orderBy('n').orderBy('series');

export const lastPrior = (q: Q, model: string) =>
	q
		.selectFrom('prior')
		.select((e) => e.fn.max('n').as('n'))
		.where('model', '=', model);

export const versionByRef = (q: Q, ref: string) => q.selectFrom('version').selectAll().where('ref', '=', ref);

export const versionsOf = (q: Q, model: string) =>
	q.selectFrom('version').selectAll().where('model', '=', model).orderBy('ordinal');

export const versionStates = (q: Q) =>
	q.selectFrom('version').select(['model', 'ref', 'ordinal', 'state', 'submitted_at']).orderBy('ordinal');

/** A run of the model, if there is one. */
export const anyRunOf = (q: Q, model: string) =>
	q.selectFrom('run').select('ref').where('model', '=', model).limit(1);

/** Who declared signs on the owner's side since an instant. */
export const ownDeclarersSince = (q: Q, model: string, since: string) =>
	q
		.selectFrom('prior')
		.select('by as actor')
		.distinct()
		.where('model', '=', model)
		.where('side', '=', 'owner')
		.where('at', '>=', since);

/** Models with a declaration on the owner's side. */
export const allOwnPriors = (q: Q) =>
	q.selectFrom('prior').select('model').distinct().where('side', '=', 'owner');

/** Models with an override that waits for the head of model risk. */
export const openOverrides = (q: Q) =>
	q.selectFrom('model').selectAll().where('override_tier', 'is not', null).orderBy('ref');
