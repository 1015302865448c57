import { fail, redirect, type RequestEvent } from '@sveltejs/kit';
import { Absent, Invalid } from '$lib/domain/faults';
import { policyLines, type Policy } from '$lib/domain/policy';
import { takeStepUp } from '$lib/server/auth/step-up';
import { refuseWith } from '$lib/server/http/faults';
import { serve, signedIn } from '$lib/server/http/serve';
import { prepareProposal, proposePolicy, type AdoptionInput } from '$lib/server/policy/adoption';
import { proposableRelease } from '$lib/server/policy/policy-view';
import type { StatementView } from '$lib/ui/step-up';
import { valueText } from '../line-text';
import { fieldNames, ownLines, typedLines, type TypedLine } from './own-lines';
import type { Actions, PageServerLoad } from './$types';

const releaseIn = (event: RequestEvent): string => event.url.searchParams.get('release') ?? '';

export const load: PageServerLoad = (event) =>
	serve(event, (ctx, actor) => {
		const digest = releaseIn(event);
		const policy = proposableRelease(ctx, actor, digest);
		return {
			digest,
			release: policy.release,
			lines: policyLines(policy).map(({ path, line }, n) => ({
				path,
				says: line.says,
				reason: line.reason,
				source: line.source,
				unit: line.unit,
				value: valueText(line.value),
				fields: fieldNames(n)
			}))
		};
	});

const releaseOf = (event: RequestEvent): Policy => {
	const policy = event.locals.ctx.policies.get(releaseIn(event));
	if (!policy) throw new Absent('There is no such release of the policy.');
	return policy;
};

/** Runs one half of the act; what was typed comes back with every message. */
const half = async <T>(
	event: RequestEvent,
	work: (input: AdoptionInput, typed: readonly TypedLine[], data: FormData) => Promise<T>
) => {
	signedIn(event);
	const data = await event.request.formData();
	let typed: readonly TypedLine[] = [];
	try {
		const release = releaseOf(event);
		typed = typedLines(release, data);
		return await work({ release: releaseIn(event), lines: ownLines(release, typed) }, typed, data);
	} catch (error) {
		if (error instanceof Invalid) return fail(400, { typed, issues: error.issues });
		return refuseWith(event, error);
	}
};

const answerIn = (data: FormData) => ({
	challenge: String(data.get('challenge') ?? ''),
	response: String(data.get('response') ?? '')
});

export const actions: Actions = {
	prepare: (event) =>
		half(event, async (input, typed) => {
			const { ctx } = event.locals;
			const { challenge, code, options, statement } = await prepareProposal(ctx, signedIn(event), input);
			const view: StatementView = {
				challenge,
				code,
				options,
				words: [
					`You propose the policy of release ${releaseOf(event).release} with the bank’s own reason for each of its ${typed.length} lines.`,
					`Digest of what is signed: ${statement.digests.map(({ sha256 }) => sha256).join(', ')}.`,
					'It is in force once an administrator has signed it too.'
				],
				fields: typed.flatMap(({ value, reason }, n) => [
					{ name: fieldNames(n).value, value },
					{ name: fieldNames(n).reason, value: reason }
				])
			};
			return { statement: view };
		}),
	sign: async (event) => {
		const answer = await half(event, async (input, _typed, data) => {
			const { ctx } = event.locals;
			const actor = signedIn(event);
			proposePolicy(ctx, actor, input, await takeStepUp(ctx, actor, answerIn(data)));
			return { proposed: true };
		});
		if ('proposed' in answer) redirect(303, '/policy');
		return answer;
	}
};
