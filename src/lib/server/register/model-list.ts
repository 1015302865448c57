import type { Actor } from '$lib/domain/actor';
import { modelState, versionWords, type ModelState, type VersionState } from '$lib/domain/register-states';
import type { ReviewDue, TierInForce } from '$lib/domain/tier';
import { allow } from '$lib/server/people/allow';
import { adoptedPolicy } from '$lib/server/policy/policy';
import type { Ctx } from '../context';
import type { Handle } from '../db/handle';
import { allModels, allOwnPriors, allPartiesNow, allUses, versionStates } from './register.queries';
import { dueOfRow } from './reviews';
import { tierOfRow } from './tier';
import { readable } from './visible';

/** One model in lists. Of models that the reader does not see whole, only reference, name, tier and state are given. */
export interface ModelLine {
	readonly ref: string;
	readonly name: string;
	readonly tier: number;
	readonly tierHow: TierInForce['how'];
	readonly state: ModelState;
	readonly whole?: {
		readonly portfolio: string;
		readonly uses: readonly string[];
		readonly owners: readonly string[];
		readonly validators: readonly string[];
		readonly versions: string;
		readonly due?: ReviewDue;
	};
}

const grouped = <T extends { model: string }>(rows: readonly T[]): ReadonlyMap<string, readonly T[]> => {
	const groups = new Map<string, T[]>();
	for (const row of rows) {
		const group = groups.get(row.model);
		if (group) group.push(row);
		else groups.set(row.model, [row]);
	}
	return groups;
};

/** Every model of the register, ordered by reference; what follows from clock and policy is computed here. */
export const listModels = (ctx: Ctx, actor: Actor, handle: Handle = ctx.read): readonly ModelLine[] => {
	allow(ctx, handle, actor, 'register.read');
	const models = handle.all(allModels(handle.q));
	if (models.length === 0) return [];
	const { policy } = adoptedPolicy(ctx, handle);
	const mine = readable(ctx, handle, actor);
	const uses = grouped(handle.all(allUses(handle.q)));
	const parties = grouped(handle.all(allPartiesNow(handle.q)));
	const versions = grouped(handle.all(versionStates(handle.q)));
	const declared = new Set(handle.all(allOwnPriors(handle.q)).map(({ model }) => model));
	const names = ctx.people.names([...parties.values()].flat().map(({ person }) => person as `p_${string}`));
	return models.map((row): ModelLine => {
		const due = dueOfRow(ctx, policy, row);
		const lines = (versions.get(row.ref) ?? []).map(({ ordinal, state }) => ({
			ordinal,
			state: state as VersionState
		}));
		const tier = tierOfRow(policy, row);
		const related = (relation: string): string[] =>
			(parties.get(row.ref) ?? [])
				.filter((party) => party.relation === relation)
				.map(({ person }) => names.get(person) ?? person);
		return Object.freeze({
			ref: row.ref,
			name: row.name,
			tier: tier.tier,
			tierHow: tier.how,
			state: modelState({
				overdue: due?.overdue ?? false,
				signsDeclared: declared.has(row.ref),
				versions: lines
			}),
			...(mine(row.ref) && {
				whole: {
					portfolio: row.portfolio,
					uses: (uses.get(row.ref) ?? []).map(({ use }) => use),
					owners: related('owner'),
					validators: related('validator'),
					versions: versionWords(lines),
					...(due && { due })
				}
			})
		});
	});
};
