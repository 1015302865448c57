import { roleWord } from '$lib/domain/roles';
import { serve } from '$lib/server/http/serve';
import { allow } from '$lib/server/people/allow';
import { waitingProposals } from '$lib/server/people/listing';
import { reviewsDue } from '$lib/server/register/reviews';
import { waitingInRegister } from '$lib/server/register/waiting';
import { listRuns } from '$lib/server/runs/run-list';
import type { PageServerLoad } from './$types';

/** Grants that a second person must approve, where the reader may be that person. */
const proposalWords = (act: string, role: string | null, name: string, by: string): string =>
	role === null ? `${act} of ${name}, begun by ${by}` : `role of ${role} for ${name}, begun by ${by}`;

export const load: PageServerLoad = (event) =>
	serve(event, (ctx, actor) => {
		allow(ctx, ctx.read, actor, 'register.read');
		const items = waitingInRegister(ctx, actor).map(({ model, name, what, href, overdue = false }) => ({
			about: `${model} ${name}`,
			what,
			href,
			overdue
		}));
		const proposals = waitingProposals(ctx, actor)
			.filter(({ mayApprove }) => mayApprove)
			.map(({ act, role, name, by }) => ({
				about: 'a second person is needed',
				what: proposalWords(act, role === null ? null : roleWord(role), name, by),
				href: '/people',
				overdue: false
			}));
		return {
			waiting: [...items, ...proposals],
			reviews: reviewsDue(ctx, actor).slice(0, 8),
			runs: listRuns(ctx, actor, { limit: 8 }).runs.map((run) => ({
				ref: run.ref,
				version: run.version,
				purpose: run.purpose,
				state: run.state,
				at: run.endedAt ?? run.requestedAt,
				checks: run.checks ?? null
			})),
			mayRegister: actor.roles.includes('owner')
		};
	});
