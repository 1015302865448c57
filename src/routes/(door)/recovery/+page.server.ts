import { fail, redirect } from '@sveltejs/kit';
import { recover } from '$lib/server/people/recovery';
import { notSignedIn } from '$lib/server/people/sign-in';
import { atDoor, field, letIn, visitorOf } from '../visitor';
import type { Actions } from './$types';

export const actions: Actions = {
	default: async (event) => {
		const data = await event.request.formData();
		const typed = { mail: field(data, 'mail'), password: field(data, 'password'), code: field(data, 'code') };
		const answer = await atDoor(event, async () => ({
			token: await recover(event.locals.ctx, visitorOf(event), typed)
		}));
		if (!('token' in answer)) return answer;
		if (answer.token === undefined) return fail(401, { message: notSignedIn });
		letIn(event, answer.token);
		redirect(303, '/recovery/passkey');
	}
};
