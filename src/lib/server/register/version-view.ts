import type { Actor } from '$lib/domain/actor';
import { parent } from '$lib/domain/references';
import { fieldDifferences, type FieldDifference } from '$lib/domain/register-differences';
import { readableSpecification } from '$lib/domain/register-readable';
import { canStep, type VersionState } from '$lib/domain/register-states';
import type { Specification } from '$lib/domain/specification';
import { allow, may } from '$lib/server/people/allow';
import type { Ctx } from '../context';
import type { Handle } from '../db/handle';
import { versionsOf } from './register.queries';
import { requireVersion, type VersionRow } from './version';

/** A version as its readers see it. */
export interface VersionView {
	readonly ref: string;
	readonly model: string;
	readonly ordinal: number;
	readonly state: VersionState;
	readonly specification: Specification;
	/** SHA-256 of the canonical specification. */
	readonly digest: string;
	readonly reason: string;
	readonly predecessor?: string;
	readonly draftedBy: string;
	readonly draftedAt: string;
	readonly revisedAt: string;
	readonly submittedBy?: string;
	readonly submittedAt?: string;
	readonly withdrawnAt?: string;
	readonly withdrawnReason?: string;
	/** Folio of the entry that changed it last. */
	readonly entry: number;
	readonly may: { readonly revise: boolean; readonly submit: boolean; readonly withdraw: boolean };
}

const viewOf = (ctx: Ctx, handle: Handle, actor: Actor, row: VersionRow): VersionView => {
	const { model } = row;
	const people = [row.drafted_by, row.submitted_by].filter((id) => id !== null) as `p_${string}`[];
	const names = ctx.people.names(people);
	const name = (id: string): string => names.get(id) ?? id;
	return Object.freeze({
		ref: row.ref,
		model,
		ordinal: row.ordinal,
		state: row.state,
		specification: JSON.parse(row.specification) as Specification,
		digest: row.digest,
		reason: row.reason,
		...(row.predecessor !== null && { predecessor: row.predecessor }),
		draftedBy: name(row.drafted_by),
		draftedAt: row.drafted_at,
		revisedAt: row.revised_at,
		...(row.submitted_by !== null && { submittedBy: name(row.submitted_by) }),
		...(row.submitted_at !== null && { submittedAt: row.submitted_at }),
		...(row.withdrawn_at !== null && { withdrawnAt: row.withdrawn_at }),
		...(row.withdrawn_reason !== null && { withdrawnReason: row.withdrawn_reason }),
		entry: row.entry,
		may: {
			revise: canStep(row.state, 'revise') && may(ctx, handle, actor, 'version.draft', { model }),
			submit: canStep(row.state, 'submit') && may(ctx, handle, actor, 'version.submit', { model }),
			withdraw: canStep(row.state, 'withdraw') && may(ctx, handle, actor, 'version.withdraw', { model })
		}
	});
};

/** A version with its whole specification. @throws Absent, also where the reader may not know of it */
export const versionOf = (ctx: Ctx, actor: Actor, ref: string, handle: Handle = ctx.read): VersionView => {
	allow(ctx, handle, actor, 'version.read', { model: parent(ref) });
	return viewOf(ctx, handle, actor, requireVersion(handle, ref));
};

/** Every version of a model, oldest first. */
export const versionsOfModel = (
	ctx: Ctx,
	actor: Actor,
	model: string,
	handle: Handle = ctx.read
): readonly VersionView[] => {
	allow(ctx, handle, actor, 'version.read', { model });
	return handle.all(versionsOf(handle.q, model)).map((row) => viewOf(ctx, handle, actor, row));
};

/** Field by field what changed from one version to another; of the same model or not. */
export const compareVersions = (
	ctx: Ctx,
	actor: Actor,
	before: string,
	after: string,
	handle: Handle = ctx.read
): readonly FieldDifference[] =>
	fieldDifferences(
		readableSpecification(versionOf(ctx, actor, before, handle).specification),
		readableSpecification(versionOf(ctx, actor, after, handle).specification)
	);
