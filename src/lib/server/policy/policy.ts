import { system } from '$lib/domain/actor';
import { Absent } from '$lib/domain/faults';
import { policySchema, type Policy } from '$lib/domain/policy';
import type { Ctx } from '../context';
import type { Handle, Tx } from '../db/handle';
import { record } from '../log/record';
import { policyByDigest, policyInForce } from './policy.queries';
import { latestRelease } from './released';

/** A policy as it was adopted. */
export interface AdoptedPolicy {
	readonly digest: string;
	readonly policy: Policy;
	readonly release: string;
	/** The bank changed lines of the release. */
	readonly changed: boolean;
	/** Folio of the adoption. */
	readonly entry: number;
	readonly at: string;
	readonly by: string;
	readonly proposedBy?: string;
}

/** Adopted documents do not change: their digest names their bytes. */
const documents = new Map<string, Policy>();

const documentOf = (ctx: Pick<Ctx, 'blobs'>, digest: string): Policy => {
	const known = documents.get(digest);
	if (known) return known;
	const bytes = ctx.blobs.get(digest);
	if (!bytes) throw new Absent(`There is no policy document ${digest}.`);
	const policy = policySchema.parse(JSON.parse(bytes.toString('utf8')));
	documents.set(digest, policy);
	return policy;
};

/**
 * The policy in force at the handle's moment.
 *
 * @throws Absent when none was adopted yet
 */
export const adoptedPolicy = (ctx: Pick<Ctx, 'policies' | 'blobs'>, handle: Handle): AdoptedPolicy => {
	const row = handle.first(policyInForce(handle.q));
	if (!row) throw new Absent('No policy has been adopted yet.');
	return Object.freeze({
		digest: row.digest,
		policy: policyOf(ctx, handle, row.digest),
		release: row.release,
		changed: row.document !== null,
		entry: row.adopted,
		at: row.at,
		by: row.by,
		...(row.proposed_by !== null && { proposedBy: row.proposed_by })
	});
};

/**
 * The policy of a digest, released or adopted with a bank's own values: what an old run was judged by.
 *
 * @throws Absent when the register never had it
 */
export const policyOf = (ctx: Pick<Ctx, 'policies' | 'blobs'>, handle: Handle, digest: string): Policy => {
	const released = ctx.policies.get(digest);
	if (released) return released;
	const row = handle.first(policyByDigest(handle.q, digest));
	if (!row || row.document === null) throw new Absent(`There is no policy ${digest}.`);
	return documentOf(ctx, row.document);
};

/** The register adopts the newest release as it opens, so that there is always a policy to judge by. */
export const adoptReleased = (ctx: Pick<Ctx, 'log'>, tx: Tx): void => {
	const { digest, policy } = latestRelease();
	record(
		ctx,
		tx,
		system('start'),
		{ rule: 'policy.adopt' },
		{
			type: 'policy.adopted',
			subjects: ['policy'],
			payload: { policy: digest, release: policy.release }
		}
	);
};
