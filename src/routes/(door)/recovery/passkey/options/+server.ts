import { json } from '@sveltejs/kit';
import { Conflict, Refused } from '$lib/domain/faults';
import { optionsForPasskey } from '$lib/server/people/passkeys';
import type { RequestHandler } from './$types';

export const POST: RequestHandler = async ({ locals: { ctx, actor } }) => {
	if (actor?.means !== 'recovery') return json({ message: 'The recovery session is over.' }, { status: 401 });
	try {
		return json(await optionsForPasskey(ctx, actor));
	} catch (fault) {
		if (fault instanceof Conflict) return json({ message: fault.message }, { status: 409 });
		if (fault instanceof Refused) return json({ message: fault.message }, { status: 403 });
		throw fault;
	}
};
