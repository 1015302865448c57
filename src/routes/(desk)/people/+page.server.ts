import { redirect } from '@sveltejs/kit';
import { superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { z } from 'zod';
import { serve } from '$lib/server/http/serve';
import { submit } from '$lib/server/http/submit';
import { may } from '$lib/server/people/allow';
import { listPeople, waitingProposals } from '$lib/server/people/listing';
import { withdraw } from '$lib/server/people/perform';
import { prepareAct, signAct } from './signing';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = (event) =>
	serve(event, (ctx, actor) => ({
		people: listPeople(ctx, actor),
		proposals: waitingProposals(ctx, actor),
		mayInvite: may(ctx, ctx.read, actor, 'person.invite')
	}));

const withdrawal = z.object({ proposal: z.coerce.number<number>().int().min(0) });

export const actions: Actions = {
	prepare: prepareAct,
	sign: signAct,
	withdraw: async (event) => {
		const form = await superValidate(event.request, zod4(withdrawal));
		const failed = await submit(event, form, (ctx, actor, { proposal }) => withdraw(ctx, actor, proposal));
		if (failed) return failed;
		redirect(303, '/people');
	}
};
