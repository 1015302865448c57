import { z } from 'zod';
import { canonical } from '$lib/chain/canonical';
import { digestOf } from '$lib/chain/digest';
import type { Actor } from '$lib/domain/actor';
import { Absent, Conflict, Invalid } from '$lib/domain/faults';
import { parent, part } from '$lib/domain/references';
import { reasonSchema, taken } from '$lib/domain/register-input';
import { signIssues } from '$lib/domain/register-signs';
import { canStep, stepRefusal, type VersionStep } from '$lib/domain/register-states';
import { parseSpecification } from '$lib/domain/specification-issues';
import type { Specification } from '$lib/domain/specification';
import { record } from '$lib/server/log/record';
import { allow } from '$lib/server/people/allow';
import type { Ctx } from '../context';
import type { Handle, Tx } from '../db/handle';
import { versionByRef, versionsOf } from './register.queries';
import { requireSigns } from './signs';

/** An entry holds 64 KiB; the rest of it needs little. */
const maxBytes = 60_000;

export type VersionRow = NonNullable<ReturnType<typeof rowOf>>;
const rowOf = (handle: Handle, ref: string) => handle.first(versionByRef(handle.q, ref));

/** The row of a version. @throws Absent */
export const requireVersion = (handle: Handle, ref: string): VersionRow => {
	const row = rowOf(handle, ref);
	if (!row) throw new Absent(`There is no version ${ref}.`);
	return row;
};

const requireStep = (row: VersionRow, step: VersionStep): void => {
	if (!canStep(row.state, step)) throw new Conflict(stepRefusal(row.ref, row.state, step));
};

interface Written {
	readonly specification: Specification;
	readonly digest: string;
}

const nfc = (value: unknown): unknown => {
	if (typeof value === 'string') return value.normalize('NFC');
	if (Array.isArray(value)) return value.map(nfc);
	if (value !== null && typeof value === 'object')
		return Object.fromEntries(Object.entries(value).map(([key, each]) => [key, nfc(each)]));
	return value;
};

/** Reads a specification and its digest; the digest is that of its canonical bytes. */
const writtenOf = (input: unknown): Written => {
	const specification = parseSpecification(nfc(input));
	const text = canonical(specification);
	if (Buffer.byteLength(text) > maxBytes)
		throw new Invalid([
			{
				pointer: '/claimed',
				message: `The specification is over ${maxBytes} bytes: leave out the claimed residuals or covariance.`
			}
		]);
	return { specification, digest: digestOf(Buffer.from(text)) };
};

const drafting = z.strictObject({
	model: z.string(),
	specification: z.unknown(),
	reason: reasonSchema.optional(),
	predecessor: z.string().optional()
});

/** Claims come after the signs; what the owner declared binds the specification. */
const requireClaimsAfterSigns = (handle: Handle, model: string, { specification }: Written): void => {
	if (!specification.claimed) return;
	requireSigns(handle, model, specification, 'version.draft');
};

type Drafting = z.output<typeof drafting>;

const enterDraft = (
	ctx: Ctx,
	tx: Tx,
	actor: Actor,
	{ model, reason, predecessor }: Drafting,
	written: Written
): string => {
	const grant = allow(ctx, tx, actor, 'version.draft', { model });
	requireClaimsAfterSigns(tx, model, written);
	const before = tx.all(versionsOf(tx.q, model));
	if (before.length > 0 && reason === undefined)
		throw new Invalid([{ pointer: '/reason', message: 'Say why the model gets another version.' }]);
	if (predecessor !== undefined && !before.some(({ ref }) => ref === predecessor))
		throw new Invalid([{ pointer: '/predecessor', message: `${model} has no version ${predecessor}.` }]);
	const parentRef = predecessor ?? before.filter(({ state }) => state !== 'withdrawn').at(-1)?.ref;
	const version = part(model, before.length + 1);
	record(ctx, tx, actor, grant, {
		type: 'version.drafted',
		subjects: [model, version],
		payload: {
			version,
			model,
			...written,
			reason: reason ?? 'First version.',
			...(parentRef !== undefined && { predecessor: parentRef })
		}
	});
	return version;
};

/**
 * Drafts the next version of a model.
 * @returns its reference, `M-014/3`
 * @throws Invalid with pointers into the specification; Refused `signs-first` when it claims coefficients too early
 */
export const draftVersion = (ctx: Ctx, actor: Actor, input: z.input<typeof drafting>): string => {
	const asked = taken(drafting, input);
	const written = writtenOf(asked.specification);
	return ctx.write((tx) => enterDraft(ctx, tx, actor, asked, written));
};

/** Drafts and submits a specification in one step: either both are entered or neither. @returns its reference */
export const submitSpecification = (ctx: Ctx, actor: Actor, input: z.input<typeof drafting>): string => {
	const asked = taken(drafting, input);
	const written = writtenOf(asked.specification);
	return ctx.write((tx) => {
		const version = enterDraft(ctx, tx, actor, asked, written);
		enterSubmission(ctx, tx, actor, version);
		return version;
	});
};

/** Replaces the specification of a draft. @throws Conflict once it was submitted or withdrawn */
export const reviseDraft = (
	ctx: Ctx,
	actor: Actor,
	version: string,
	input: { readonly specification: unknown; readonly reason?: string | undefined }
): void => {
	const written = writtenOf(input.specification);
	const model = parent(version);
	ctx.write((tx) => {
		const grant = allow(ctx, tx, actor, 'version.draft', { model });
		const row = requireVersion(tx, version);
		requireStep(row, 'revise');
		requireClaimsAfterSigns(tx, model, written);
		const reason = input.reason === undefined ? row.reason : taken(reasonSchema, input.reason, '/reason');
		record(ctx, tx, actor, grant, {
			type: 'version.revised',
			subjects: [model, version],
			payload: {
				version,
				model,
				...written,
				reason,
				...(row.predecessor !== null && { predecessor: row.predecessor })
			}
		});
	});
};

const enterSubmission = (ctx: Ctx, tx: Tx, actor: Actor, version: string): void => {
	const model = parent(version);
	const grant = allow(ctx, tx, actor, 'version.submit', { model });
	const row = requireVersion(tx, version);
	requireStep(row, 'submit');
	const specification = JSON.parse(row.specification) as Specification;
	const issues = signIssues(specification, requireSigns(tx, model, specification, 'version.submit'));
	if (issues.length > 0) throw new Invalid(issues);
	record(ctx, tx, actor, grant, {
		type: 'version.submitted',
		subjects: [model, version],
		payload: { version, model, digest: row.digest }
	});
};

/**
 * Submits a draft: from here on no field of it can change.
 * @throws Refused `signs-first`; Invalid where the specification says another sign or range than was declared
 */
export const submitVersion = (ctx: Ctx, actor: Actor, version: string): void =>
	ctx.write((tx) => enterSubmission(ctx, tx, actor, version));

/** Withdraws a draft or a submitted version, with the reason; it stays readable. */
export const withdrawVersion = (ctx: Ctx, actor: Actor, version: string, typed: string): void => {
	const reason = taken(reasonSchema, typed, '/reason');
	const model = parent(version);
	ctx.write((tx) => {
		const grant = allow(ctx, tx, actor, 'version.withdraw', { model });
		const row = requireVersion(tx, version);
		requireStep(row, 'withdraw');
		record(ctx, tx, actor, grant, {
			type: 'version.withdrawn',
			subjects: [model, version],
			payload: { version, model, reason }
		});
	});
};
