import type { PersonId } from '$lib/domain/actor';
import { addMonths, dateIn } from '$lib/domain/calendar';
import type { ModelFacts, Party } from '$lib/domain/permissions';
import { adoptedPolicy } from '$lib/server/policy/policy';
import type { Ctx } from '../context';
import type { Handle } from '../db/handle';
import {
	actorsSince,
	lastFolio,
	modelByRef,
	ownDeclarersSince,
	partiesEver,
	partiesOfPerson,
	plannedRunnersSince,
	versionsOf
} from './register.queries';

/** Entries whose actor worked on the model; judging it is not among them. */
const working = [
	'model.registered',
	'model.edited',
	'version.drafted',
	'version.revised',
	'version.submitted',
	'version.withdrawn',
	'dataset.opened',
	'dataset.attached',
	'vintage.stored'
] as const;

const isPerson = (id: string): id is PersonId => id.startsWith('p_');

/** First date that counts as touching: the look-back before the last submission, or before now. */
const lookBackFrom = (
	ctx: Pick<Ctx, 'now' | 'config' | 'policies' | 'blobs'>,
	handle: Handle,
	ref: string
): string => {
	const submitted = handle
		.all(versionsOf(handle.q, ref))
		.map(({ submitted_at }) => submitted_at)
		.filter((at) => at !== null)
		.at(-1);
	const months = Number(adoptedPolicy(ctx, handle).policy.lookBack.value);
	return addMonths(dateIn(ctx.config.zone, submitted ?? ctx.now()), -months);
};

/**
 * What authorisation must know of a model: who stands in which relation to it now, and who touched it within the
 * look-back of the policy, as entries and relations of this handle say.
 */
export const modelFacts = (
	ctx: Pick<Ctx, 'now' | 'config' | 'policies' | 'blobs'>,
	handle: Handle,
	ref: string
): ModelFacts | undefined => {
	if (!handle.first(modelByRef(handle.q, ref))) return undefined;
	const since = lookBackFrom(ctx, handle, ref);
	const ever = handle.all(partiesEver(handle.q, ref));
	const now = (relation: Party): PersonId[] =>
		ever
			.filter((party) => party.relation === relation && party.until_at === null)
			.map(({ person }) => person as PersonId);
	const related = ever
		.filter(({ relation, until_at }) => relation !== 'validator' && (until_at === null || until_at >= since))
		.map(({ person }) => person);
	const acted = [
		...handle.all(actorsSince(handle.q, ref, working, since)),
		...handle.all(plannedRunnersSince(handle.q, ref, since)),
		...handle.all(ownDeclarersSince(handle.q, ref, since))
	].map(({ actor }) => actor);
	return Object.freeze({
		ref,
		owners: now('owner'),
		developers: now('developer'),
		validators: now('validator'),
		touched: new Set([...related, ...acted].filter(isPerson)),
		searchedTo: handle.first(lastFolio(handle.q))?.seq ?? 0
	});
};

/** A person's relations to models in force now. */
export const partiesOf = (handle: Handle, person: PersonId): readonly { model: string; party: Party }[] =>
	handle
		.all(partiesOfPerson(handle.q, person))
		.map(({ model, relation }) => Object.freeze({ model, party: relation }));
