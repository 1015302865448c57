import type { Actor } from '$lib/domain/actor';
import type { Policy } from '$lib/domain/policy';
import type { Specification } from '$lib/domain/specification';
import { undeclared } from '$lib/domain/register-signs';
import { may } from '$lib/server/people/allow';
import { adoptedPolicy } from '$lib/server/policy/policy';
import type { Ctx } from '../context';
import type { Handle } from '../db/handle';
import { partiesOf } from './facts';
import { modelByRef, openOverrides, versionsOf } from './register.queries';
import { dueOfRow } from './reviews';
import { signsInForce } from './signs';
import { tierOfRow } from './tier';

/** Something in the register that waits for the reader, and where it is done. */
export interface WaitingItem {
	readonly model: string;
	readonly name: string;
	readonly what: string;
	readonly href: string;
	readonly overdue?: boolean;
}

const soon = 60;

const ofOwner = (ctx: Ctx, handle: Handle, policy: Policy, model: string): Omit<WaitingItem, 'name'>[] => {
	const row = handle.first(modelByRef(handle.q, model))!;
	const due = dueOfRow(ctx, policy, row);
	const declared = signsInForce(handle, model, 'owner');
	const versions = handle.all(versionsOf(handle.q, model));
	const at = `/models/${model}`;
	const review =
		due && due.days <= soon
			? [
					{
						model,
						what: due.overdue
							? `review overdue by ${-due.days} ${due.days === -1 ? 'day' : 'days'}, ${due.reason}`
							: `review due on ${due.date}, ${due.reason}`,
						href: at,
						overdue: due.overdue
					}
				]
			: [];
	if (declared.length === 0)
		return [...review, { model, what: 'signs and plausible ranges are not declared', href: `${at}/signs` }];
	if (versions.length === 0)
		return [...review, { model, what: 'no version is specified', href: `${at}/versions/new` }];
	const drafts = versions
		.filter(({ state }) => state === 'draft')
		.map(({ ref, ordinal, specification }) => {
			const missing = undeclared(JSON.parse(specification) as Specification, declared);
			const what = missing.length
				? `${ref} is a draft; signs of ${missing.join(', ')} are not declared`
				: `${ref} is a draft, ready to be submitted`;
			return { model, what, href: missing.length ? `${at}/signs` : `${at}/versions/${ordinal}` };
		});
	return [...review, ...drafts];
};

const ofValidator = (handle: Handle, policy: Policy, model: string): Omit<WaitingItem, 'name'>[] => {
	const row = handle.first(modelByRef(handle.q, model))!;
	const tier = tierOfRow(policy, row);
	if (row.override_tier !== null || (tier.how !== 'proposed' && tier.tier === tier.proposed)) return [];
	if (tier.how === 'overridden') return [];
	const what =
		tier.how === 'proposed'
			? `tier ${tier.proposed} is proposed and not confirmed`
			: `the answers give tier ${tier.proposed} now; tier ${tier.tier} was confirmed`;
	return [{ model, what, href: `/models/${model}#tier` }];
};

/** What waits for the reader in the register, for the desk; the most pressing first. */
export const waitingInRegister = (
	ctx: Ctx,
	actor: Actor,
	handle: Handle = ctx.read
): readonly WaitingItem[] => {
	if (actor.person === 'system' || actor.person === 'cli') return [];
	const { policy } = adoptedPolicy(ctx, handle);
	const related = partiesOf(handle, actor.person);
	const team = new Set(related.filter(({ party }) => party !== 'validator').map(({ model }) => model));
	const judged = related.filter(({ party }) => party === 'validator').map(({ model }) => model);
	const overrides = handle
		.all(openOverrides(handle.q))
		.filter(({ ref, override_by }) =>
			may(ctx, handle, actor, 'tier.override', { model: ref, first: override_by as `p_${string}` })
		)
		.map(({ ref, override_tier }) => ({
			model: ref,
			what: `tier ${override_tier} is proposed against the answers and needs your agreement`,
			href: `/models/${ref}#tier`
		}));
	const items: Omit<WaitingItem, 'name'>[] = [
		...[...team].flatMap((model) => ofOwner(ctx, handle, policy, model)),
		...judged.flatMap((model) => ofValidator(handle, policy, model)),
		...overrides
	];
	return items
		.map((item) => ({ ...item, name: handle.first(modelByRef(handle.q, item.model))!.name }))
		.sort((a, b) => Number(b.overdue ?? false) - Number(a.overdue ?? false));
};
