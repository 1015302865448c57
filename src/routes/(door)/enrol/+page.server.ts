import { fail } from '@sveltejs/kit';
import { Conflict, Invalid } from '$lib/domain/faults';
import { enrol, lookAtLink, type Opened } from '$lib/server/people/enrolment';
import { atDoor, field, letIn, visitorOf } from '../visitor';
import type { Actions, PageServerLoad } from './$types';

const dead =
	'This link opens nothing: it is mistyped, was used, or is over. Ask an administrator for another.';

export const load: PageServerLoad = ({ locals }) => ({ institution: locals.ctx.config.institution });

const typedIn = (data: FormData) => ({
	secret: field(data, 'secret').trim(),
	name: field(data, 'name'),
	mail: field(data, 'mail'),
	staffNumber: field(data, 'staffNumber')
});

const shown = ({ name, kind, needsIdentity }: Opened) => ({ name, kind, needsIdentity });

export const actions: Actions = {
	open: async (event) => {
		const { secret } = typedIn(await event.request.formData());
		return atDoor(
			event,
			async () => ({ secret, opened: shown(await lookAtLink(event.locals.ctx, visitorOf(event), secret)) }),
			dead
		);
	},
	enrol: async (event) => {
		const data = await event.request.formData();
		const { secret, ...typed } = typedIn(data);
		const visitor = visitorOf(event);
		const { ctx } = event.locals;
		const answer = await atDoor(
			event,
			async () => {
				const opened = shown(await lookAtLink(ctx, visitor, secret));
				try {
					const sent = { secret, password: field(data, 'password'), response: field(data, 'response') };
					return await enrol(ctx, visitor, { ...sent, identity: typed });
				} catch (fault) {
					if (fault instanceof Invalid)
						return fail(400, { secret, opened, typed, issues: [...fault.issues] });
					if (fault instanceof Conflict)
						return fail(409, {
							secret,
							opened,
							typed,
							issues: [{ pointer: '/mail', message: fault.message }]
						});
					throw fault;
				}
			},
			dead
		);
		if (!('token' in answer)) return answer;
		letIn(event, answer.token);
		return { codes: answer.codes };
	}
};
