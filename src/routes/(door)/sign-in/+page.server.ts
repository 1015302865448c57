import { error, fail, redirect } from '@sveltejs/kit';
import type { PersonId } from '$lib/domain/actor';
import { Absent } from '$lib/domain/faults';
import { roleWords } from '$lib/domain/roles';
import { listSeats } from '$lib/server/people/seats';
import { notSignedIn, signInWithPasskey, takeSeat } from '$lib/server/people/sign-in';
import { nextPath } from '../next';
import { atDoor, field, letIn, visitorOf } from '../visitor';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = ({ locals, url }) => {
	const next = nextPath(url.searchParams.get('next'));
	if (locals.actor && locals.actor.means !== 'recovery') redirect(303, next);
	const { ctx } = locals;
	return {
		next,
		institution: ctx.config.institution,
		demo: ctx.config.demo,
		enrolled: url.searchParams.get('passkey') === 'new',
		seats: listSeats(ctx).map(({ person, name, roles }) => ({ person, name, roles: roleWords(roles) }))
	};
};

export const actions: Actions = {
	passkey: async (event) => {
		const data = await event.request.formData();
		const answer = await atDoor(event, async () => ({
			token: await signInWithPasskey(event.locals.ctx, visitorOf(event), field(data, 'response'))
		}));
		if (!('token' in answer)) return answer;
		if (answer.token === undefined) return fail(401, { message: notSignedIn });
		letIn(event, answer.token);
		redirect(303, nextPath(field(data, 'next')));
	},
	seat: async (event) => {
		const data = await event.request.formData();
		try {
			const person = field(data, 'person') as PersonId;
			letIn(event, await takeSeat(event.locals.ctx, visitorOf(event), person));
		} catch (fault) {
			if (fault instanceof Absent) error(404, 'There is no such page.');
			throw fault;
		}
		redirect(303, nextPath(field(data, 'next')));
	}
};
