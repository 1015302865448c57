import type { Actor } from '$lib/domain/actor';
import { Conflict, Invalid } from '$lib/domain/faults';
import { part } from '$lib/domain/references';
import { draftOfSpecification, emptyDraft, type SpecificationDraft } from '$lib/domain/register-draft';
import {
	draftIssues,
	readDraft,
	type DraftDeclaration,
	type DraftIssue
} from '$lib/domain/register-draft-specification';
import { allow } from '$lib/server/people/allow';
import type { Ctx } from '../context';
import { priorsOf, versionsOf } from './register.queries';
import { draftVersion, reviseDraft, submitVersion, submitSpecification } from './version';
import { versionOf } from './version-view';

/** Which version a form begins from: a draft that it revises, or a version that the next one follows. */
export type FormOrigin =
	{ readonly kind: 'new' } | { readonly kind: 'from' | 'revise'; readonly ordinal: number };

/** What the page of a version's form shows. */
export interface VersionForm {
	readonly draft: SpecificationDraft;
	readonly declared: readonly DraftDeclaration[];
	/** The next version needs a reason. */
	readonly first: boolean;
	/** The version that is revised, or followed. */
	readonly origin?: string;
}

/** The owner's declarations in force, in the words the specification takes over. */
const declarationsOf = (ctx: Ctx, model: string): readonly DraftDeclaration[] => {
	const latest = new Map<string, DraftDeclaration>();
	for (const { side, series, sign, low, high, rationale } of ctx.read.all(priorsOf(ctx.read.q, model)))
		if (side === 'owner') latest.set(series, { series, sign, low, high, rationale });
	return [...latest.values()];
};

/**
 * The form as it opens: the draft to revise, the version to follow, or the newest version; for a first version the
 * declared drivers, on the frequency and periods of the newest data.
 */
export const openVersionForm = (
	ctx: Ctx,
	actor: Actor,
	model: string,
	origin: FormOrigin,
	data: { readonly frequency: string; readonly from: string; readonly to: string } | undefined
): VersionForm => {
	allow(ctx, ctx.read, actor, 'version.draft', { model });
	const declared = declarationsOf(ctx, model);
	const versions = ctx.read.all(versionsOf(ctx.read.q, model));
	const ordinal = origin.kind === 'new' ? versions.at(-1)?.ordinal : origin.ordinal;
	if (ordinal === undefined)
		return {
			declared,
			first: true,
			draft: emptyDraft({
				frequency: data?.frequency ?? 'quarterly',
				drivers: declared.map(({ series }) => series),
				...(data && { from: data.from, to: data.to })
			})
		};
	const version = versionOf(ctx, actor, part(model, ordinal));
	if (origin.kind === 'revise' && !version.may.revise)
		throw new Conflict(`${version.ref} can no longer be revised; draft the next version instead.`);
	const reason = origin.kind === 'revise' ? version.reason : '';
	return {
		declared,
		first: false,
		origin: version.ref,
		draft: draftOfSpecification(version.specification, reason)
	};
};

/** What became of a form that was sent. */
export type SavedForm =
	{ readonly saved: string } | { readonly issues: readonly DraftIssue[]; readonly draft: SpecificationDraft };

/** Stores a form as a draft or submits it; what cannot be taken comes back with the name of each field. */
export const saveVersionForm = (
	ctx: Ctx,
	actor: Actor,
	model: string,
	origin: FormOrigin,
	sent: { readonly draft: SpecificationDraft; readonly submit: boolean }
): SavedForm => {
	const { draft, submit } = sent;
	allow(ctx, ctx.read, actor, 'version.draft', { model });
	const read = readDraft(draft, declarationsOf(ctx, model));
	if (read.issues.length > 0) return { issues: read.issues, draft };
	const { specification } = read;
	const reason = draft.reason === '' ? undefined : draft.reason;
	try {
		if (origin.kind === 'revise') {
			const version = part(model, origin.ordinal);
			reviseDraft(ctx, actor, version, { specification, reason });
			if (submit) submitVersion(ctx, actor, version);
			return { saved: version };
		}
		const predecessor = origin.kind === 'from' ? part(model, origin.ordinal) : undefined;
		const input = { model, specification, reason, predecessor };
		return { saved: (submit ? submitSpecification : draftVersion)(ctx, actor, input) };
	} catch (fault) {
		if (!(fault instanceof Invalid)) throw fault;
		return { issues: draftIssues(read, fault.issues), draft };
	}
};
