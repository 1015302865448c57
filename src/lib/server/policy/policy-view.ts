import type { Actor, PersonId } from '$lib/domain/actor';
import { policyLines, type Policy, type PolicyLine } from '$lib/domain/policy';
import { Absent } from '$lib/domain/faults';
import { allow, may } from '$lib/server/people/allow';
import type { Ctx } from '../context';
import type { Handle } from '../db/handle';
import { adoptedPolicy, policyOf, type AdoptedPolicy } from './policy';
import { openProposal, policyAdoptions } from './policy.queries';

/** A line as the page shows it: its value, and the release's where the bank took another. */
export interface LineView {
	readonly path: string;
	readonly line: PolicyLine;
	readonly released?: PolicyLine['value'];
}

export interface AdoptionView {
	readonly entry: number;
	readonly digest: string;
	readonly release: string;
	readonly at: string;
	readonly by: string;
	readonly proposedBy?: string;
	/** The bank adopted it with reasons of its own. */
	readonly own: boolean;
}

export interface ProposalView {
	readonly proposal: number;
	readonly release: string;
	readonly at: string;
	readonly by: string;
	readonly changed: readonly string[];
	readonly maySign: boolean;
}

export interface PolicyPage {
	readonly inForce: AdoptedPolicy;
	/** The policy shown: the one in force, or an earlier one that a run was judged by. */
	readonly shown: { readonly policy: Policy; readonly digest: string; readonly inForce: boolean };
	readonly lines: readonly LineView[];
	readonly adoptions: readonly AdoptionView[];
	readonly proposal?: ProposalView;
	/** A newer release than the one in force, or the same one for a first adoption with own reasons. */
	readonly releases: readonly { readonly digest: string; readonly release: string }[];
	readonly mayPropose: boolean;
}

const lineViews = (policy: Policy, release: Policy | undefined): LineView[] => {
	const released = new Map(release ? policyLines(release).map(({ path, line }) => [path, line.value]) : []);
	return policyLines(policy).map(({ path, line }) => {
		const original = released.get(path);
		const differs = original !== undefined && JSON.stringify(original) !== JSON.stringify(line.value);
		return { path, line, ...(differs && { released: original }) };
	});
};

const proposalOf = (ctx: Ctx, handle: Handle, actor: Actor): ProposalView | undefined => {
	const open = handle.first(openProposal(handle.q));
	if (!open) return undefined;
	const name = ctx.people.names([open.by as PersonId]);
	return {
		proposal: open.proposal,
		release: open.release,
		at: open.at,
		by: name.get(open.by as PersonId) ?? open.by,
		changed: JSON.parse(open.changed) as string[],
		maySign: may(ctx, handle, actor, 'policy.adopt', { first: open.by as PersonId })
	};
};

/**
 * The policy in force in words, or the earlier one of a digest; every adoption, and the proposal that waits.
 *
 * @throws Refused, Absent
 */
export const policyPage = (
	ctx: Ctx,
	actor: Actor,
	digest?: string,
	handle: Handle = ctx.read
): PolicyPage => {
	allow(ctx, handle, actor, 'policy.read');
	const inForce = adoptedPolicy(ctx, handle);
	const policy = digest === undefined ? inForce.policy : policyOf(ctx, handle, digest);
	const released = [...ctx.policies].map(([digest, policy]) => ({ digest, release: policy.release, policy }));
	const release = released.find((each) => each.release === policy.release)?.policy;
	const rows = handle.all(policyAdoptions(handle.q));
	const names = ctx.people.names(
		rows.flatMap(({ by, proposed_by }) => [by, ...(proposed_by === null ? [] : [proposed_by])]) as PersonId[]
	);
	const proposal = proposalOf(ctx, handle, actor);
	return {
		inForce,
		shown: {
			policy,
			digest: digest ?? inForce.digest,
			inForce: digest === undefined || digest === inForce.digest
		},
		lines: lineViews(policy, release),
		adoptions: rows.map((row) => ({
			entry: row.adopted,
			digest: row.digest,
			release: row.release,
			at: row.at,
			by: names.get(row.by as PersonId) ?? row.by,
			...(row.proposed_by !== null && {
				proposedBy: names.get(row.proposed_by as PersonId) ?? row.proposed_by
			}),
			own: row.document !== null
		})),
		...(proposal && { proposal }),
		releases: released.map(({ digest, release: name }) => ({ digest, release: name })),
		mayPropose: may(ctx, handle, actor, 'policy.adopt')
	};
};

/**
 * A release that the actor may propose.
 *
 * @throws Refused, Absent
 */
export const proposableRelease = (ctx: Ctx, actor: Actor, digest: string): Policy => {
	allow(ctx, ctx.read, actor, 'policy.adopt');
	const policy = ctx.policies.get(digest);
	if (!policy) throw new Absent('There is no such release of the policy.');
	return policy;
};
