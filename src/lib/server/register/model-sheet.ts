import type { Actor } from '$lib/domain/actor';
import { Absent } from '$lib/domain/faults';
import { modelState, versionWords, type ModelState, type VersionState } from '$lib/domain/register-states';
import type { ReviewDue, TierAnswer, TierInForce } from '$lib/domain/tier';
import { allow, may } from '$lib/server/people/allow';
import { adoptedPolicy } from '$lib/server/policy/policy';
import type { Ctx } from '../context';
import type { Handle } from '../db/handle';
import { modelByRef, partiesEver, usesOf, versionsOf } from './register.queries';
import { dueOfRow } from './reviews';
import { signsInForce } from './signs';
import { tierOfRow } from './tier';

/** A relation of a person to a model, with its dates. */
export interface PartyView {
	readonly person: string;
	readonly name: string;
	readonly relation: 'owner' | 'developer' | 'validator';
	readonly from: string;
	readonly until?: string;
}

/** What every signed-in person may know of a model. */
export interface ModelHeader {
	readonly ref: string;
	readonly name: string;
	readonly tier: TierInForce;
	readonly state: ModelState;
}

/** A model as its owner, developers and the overseers see it. */
export interface ModelSheet extends ModelHeader {
	readonly purpose: string;
	readonly portfolio: string;
	readonly uses: readonly string[];
	readonly answers: readonly (TierAnswer & { readonly label: string; readonly says: string })[];
	readonly tierReason?: string;
	/** An override that waits for the head of model risk. */
	readonly override?: { readonly tier: number; readonly reason: string; readonly by: string };
	readonly registeredAt: string;
	readonly registeredBy: string;
	readonly parties: readonly PartyView[];
	readonly versions: string;
	readonly due?: ReviewDue;
	/** Adopted policy the tier and dates follow. */
	readonly policy: { readonly release: string; readonly digest: string };
	readonly entry: number;
	readonly may: Readonly<Record<Right, boolean>>;
}

/** What a reader can do with a model, as the permission table answers. */
export type Right =
	| 'edit'
	| 'declare'
	| 'declareAsValidator'
	| 'draft'
	| 'submit'
	| 'confirmTier'
	| 'override'
	| 'agree'
	| 'assign'
	| 'store'
	| 'runPlanned'
	| 'runValidation'
	| 'runExploratory';

type ModelRow = NonNullable<ReturnType<typeof rowOf>>;
const rowOf = (handle: Handle, ref: string) => handle.first(modelByRef(handle.q, ref));

const headerOf = (
	ctx: Ctx,
	handle: Handle,
	row: ModelRow
): ModelHeader & { due?: ReviewDue; versions: string } => {
	const { policy } = adoptedPolicy(ctx, handle);
	const due = dueOfRow(ctx, policy, row);
	const versions = handle
		.all(versionsOf(handle.q, row.ref))
		.map(({ ordinal, state }) => ({ ordinal, state: state as VersionState }));
	const signsDeclared = signsInForce(handle, row.ref, 'owner').length > 0;
	return {
		ref: row.ref,
		name: row.name,
		tier: tierOfRow(policy, row),
		state: modelState({ overdue: due?.overdue ?? false, signsDeclared, versions }),
		versions: versionWords(versions),
		...(due && { due })
	};
};

const required = (handle: Handle, ref: string): ModelRow => {
	const row = rowOf(handle, ref);
	if (!row) throw new Absent(`There is no model ${ref}.`);
	return row;
};

/** Reference, name, tier and state: what is open to every signed-in person. */
export const modelHeader = (ctx: Ctx, actor: Actor, ref: string, handle: Handle = ctx.read): ModelHeader => {
	allow(ctx, handle, actor, 'model.read-header', { model: ref });
	const { name, tier, state } = headerOf(ctx, handle, required(handle, ref));
	return Object.freeze({ ref, name, tier, state });
};

const partiesOfModel = (ctx: Ctx, handle: Handle, model: string): PartyView[] => {
	const rows = handle.all(partiesEver(handle.q, model));
	const names = ctx.people.names(rows.map(({ person }) => person as `p_${string}`));
	return rows.map(({ person, relation, from_at, until_at }) =>
		Object.freeze({
			person,
			name: names.get(person) ?? person,
			relation,
			from: from_at,
			...(until_at !== null && { until: until_at })
		})
	);
};

const rightsOf = (ctx: Ctx, handle: Handle, actor: Actor, row: ModelRow): ModelSheet['may'] => {
	const can = (action: Parameters<typeof may>[3], about: object = {}): boolean =>
		may(ctx, handle, actor, action, { model: row.ref, ...about });
	return Object.freeze({
		edit: can('model.edit'),
		declare: can('driver.declare'),
		declareAsValidator: can('prior.declare'),
		draft: can('version.draft'),
		submit: can('version.submit'),
		confirmTier: can('tier.confirm'),
		override: can('tier.override'),
		agree: row.override_by !== null && can('tier.override', { first: row.override_by }),
		assign: can('validation.assign'),
		store: can('dataset.store'),
		runPlanned: can('run.start', { purpose: 'planned' }),
		runValidation: can('run.start', { purpose: 'validation' }),
		runExploratory: can('run.start', { purpose: 'exploratory' })
	});
};

/**
 * Everything a registration says of a model, with what follows from it.
 * @throws Refused (visible) where the reader may know the model only by its header
 */
export const modelSheet = (ctx: Ctx, actor: Actor, ref: string, handle: Handle = ctx.read): ModelSheet => {
	allow(ctx, handle, actor, 'model.read', { model: ref });
	const row = required(handle, ref);
	const { digest, policy } = adoptedPolicy(ctx, handle);
	const answers = (JSON.parse(row.answers) as TierAnswer[]).map((answer) => {
		const offered = policy.questions.find(({ id }) => id === answer.question)?.answers;
		const { label, says } = offered?.find(({ score }) => score === answer.score) ?? {
			label: `score ${answer.score}`,
			says: 'The adopted policy offers this answer no more.'
		};
		return { ...answer, label, says };
	});
	const names = ctx.people.names(
		[row.registered_by, row.override_by].filter((id) => id !== null) as `p_${string}`[]
	);
	return Object.freeze({
		...headerOf(ctx, handle, row),
		purpose: row.purpose,
		portfolio: row.portfolio,
		uses: handle.all(usesOf(handle.q, ref)).map(({ use }) => use),
		answers,
		...(row.tier_reason !== null && { tierReason: row.tier_reason }),
		...(row.override_tier !== null &&
			row.override_by !== null && {
				override: {
					tier: row.override_tier,
					reason: row.override_reason ?? '',
					by: names.get(row.override_by) ?? row.override_by
				}
			}),
		registeredAt: row.registered_at,
		registeredBy: names.get(row.registered_by) ?? row.registered_by,
		parties: partiesOfModel(ctx, handle, ref),
		policy: { release: policy.release, digest },
		entry: row.entry,
		may: rightsOf(ctx, handle, actor, row)
	});
};
