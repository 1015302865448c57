import { roles, type PersonId } from '$lib/domain/actor';
import { roleWord } from '$lib/domain/roles';
import { serve } from '$lib/server/http/serve';
import { needsTwo } from '$lib/server/people/acts';
import { may } from '$lib/server/people/allow';
import { passkeysOf, personRow, rolesHeld } from '$lib/server/people/listing';
import { prepareAct, signAct } from '../signing';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = (event) =>
	serve(event, (ctx, actor) => {
		// The matcher has judged its form.
		const person = event.params.person as PersonId;
		const row = personRow(ctx, actor, person);
		return {
			row,
			held: rolesHeld(ctx, actor, person),
			passkeys: passkeysOf(ctx, actor, person),
			models: ctx.facts.parties(ctx.read, person),
			self: actor.person === person,
			mayAct: may(ctx, ctx.read, actor, 'session.end-all') && actor.person !== person,
			grantable: roles
				.filter((role) => !row.roles.includes(role))
				.map((role) => ({
					value: role,
					label: `${roleWord(role)}${needsTwo(role) ? ' (two administrators)' : ''}`
				}))
		};
	});

export const actions: Actions = { prepare: prepareAct, sign: signAct };
