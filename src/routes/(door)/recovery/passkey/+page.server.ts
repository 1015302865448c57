import { fail, redirect } from '@sveltejs/kit';
import { Conflict, Refused } from '$lib/domain/faults';
import { receivePasskey } from '$lib/server/people/passkeys';
import { recordRefusal } from '$lib/server/people/refusals';
import { signOut } from '$lib/server/people/sign-in';
import { field, letOut } from '../../visitor';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = ({ locals }) => {
	if (locals.actor?.means !== 'recovery') redirect(303, '/sign-in');
	const { ctx, actor } = locals;
	return { name: ctx.people.names([actor.person]).get(actor.person) ?? '' };
};

export const actions: Actions = {
	default: async (event) => {
		const { ctx, actor } = event.locals;
		if (actor?.means !== 'recovery') redirect(303, '/sign-in');
		const data = await event.request.formData();
		try {
			await receivePasskey(ctx, actor, field(data, 'response'));
		} catch (fault) {
			if (fault instanceof Refused) recordRefusal(ctx, actor, fault);
			else if (!(fault instanceof Conflict)) throw fault;
			return fail(400, { message: fault.message });
		}
		// The recovery session has done all it may; the new passkey opens a whole one.
		signOut(ctx, actor);
		letOut(event);
		redirect(303, '/sign-in?passkey=new');
	}
};
