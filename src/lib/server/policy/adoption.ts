import { ownPolicy, type OwnLine } from '$lib/battery/own-policy';
import { canonical } from '$lib/chain/canonical';
import { digestOf } from '$lib/chain/digest';
import type { Actor, PersonId } from '$lib/domain/actor';
import type { Grant } from '$lib/domain/entry';
import { Absent, Conflict } from '$lib/domain/faults';
import type { Policy } from '$lib/domain/policy';
import {
	confirmSigned,
	prepareStepUp,
	type Signed,
	type StepUpRequest,
	type ToSign
} from '$lib/server/auth/step-up';
import { allow } from '$lib/server/people/allow';
import type { Ctx } from '../context';
import type { Handle } from '../db/handle';
import { record } from '../log/record';
import { openProposal } from './policy.queries';

/** A release with the bank's word on each of its lines. */
export interface AdoptionInput {
	/** Digest of the released policy. */
	readonly release: string;
	readonly lines: readonly OwnLine[];
}

const subject = 'policy';

interface Planned {
	readonly bytes: Uint8Array;
	readonly digest: string;
	readonly policy: Policy;
	readonly toSign: ToSign;
}

const released = (ctx: Ctx, digest: string): Policy => {
	const policy = ctx.policies.get(digest);
	if (!policy) throw new Absent('There is no such release of the policy.');
	return policy;
};

/** The document to adopt: the release with the bank's values and reasons, as canonical JSON. */
const planned = (ctx: Ctx, input: AdoptionInput): Planned => {
	const release = released(ctx, input.release);
	const { policy, changed } = ownPolicy(release, input.lines);
	const bytes = Buffer.from(canonical(policy), 'utf8');
	const digest = digestOf(bytes);
	return {
		bytes,
		digest,
		policy,
		toSign: {
			action: 'policy.adopt',
			decision: 'propose',
			subject,
			payload: { policy: digest, release: release.release, document: digest, changed }
		}
	};
};

/** Checks a proposal and builds the statement the head of model risk signs. */
export const prepareProposal = async (
	ctx: Ctx,
	actor: Actor,
	input: AdoptionInput
): Promise<StepUpRequest> => {
	allow(ctx, ctx.read, actor, 'policy.adopt');
	return prepareStepUp(ctx, actor, planned(ctx, input).toSign);
};

/** The head of model risk proposes the policy as signed; it is in force once an admin signs it too. */
export const proposePolicy = (ctx: Ctx, actor: Actor, input: AdoptionInput, signed: Signed): number =>
	ctx.write((tx) => {
		const grant = allow(ctx, tx, actor, 'policy.adopt');
		const plan = planned(ctx, input);
		const stepUp = confirmSigned(ctx, tx, actor, signed, plan.toSign);
		const document = ctx.blobs.put(tx, plan.bytes);
		const changed = plan.toSign.payload['changed'] as readonly string[];
		const entry = record(ctx, tx, actor, grant, {
			type: 'policy.proposed',
			subjects: [subject],
			payload: { policy: plan.digest, release: plan.policy.release, document, changed: [...changed] },
			stepUp
		});
		return entry.seq;
	});

const waiting = (handle: Handle, proposal: number) => {
	const open = handle.first(openProposal(handle.q));
	if (open?.proposal !== proposal)
		throw new Conflict('This proposal does not wait for a signature any more; read the page again.');
	return open;
};

const secondOf = (ctx: Ctx, handle: Handle, actor: Actor, by: string): Grant =>
	allow(ctx, handle, actor, 'policy.adopt', { first: by as PersonId });

const confirmation = (open: ReturnType<typeof waiting>): ToSign => ({
	action: 'policy.adopt',
	decision: 'adopt',
	subject,
	payload: {
		policy: open.digest,
		release: open.release,
		...(open.document !== null && { document: open.document }),
		proposal: open.proposal
	}
});

/** Builds the statement the admin signs under a proposal. */
export const prepareConfirmation = async (
	ctx: Ctx,
	actor: Actor,
	proposal: number
): Promise<StepUpRequest> => {
	const open = waiting(ctx.read, proposal);
	secondOf(ctx, ctx.read, actor, open.by);
	return prepareStepUp(ctx, actor, confirmation(open));
};

/** An admin signs the proposal: the policy is in force from this entry on; older results keep theirs. */
export const confirmPolicy = (ctx: Ctx, actor: Actor, proposal: number, signed: Signed): void =>
	ctx.write((tx) => {
		const open = waiting(tx, proposal);
		const grant = secondOf(ctx, tx, actor, open.by);
		const stepUp = confirmSigned(ctx, tx, actor, signed, confirmation(open));
		record(ctx, tx, actor, grant, {
			type: 'policy.adopted',
			subjects: [subject],
			payload: {
				policy: open.digest,
				release: open.release,
				...(open.document !== null && { document: open.document }),
				proposal
			},
			stepUp
		});
	});
