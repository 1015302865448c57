import type { PersonId } from '$lib/domain/actor';
import { roleWords } from '$lib/domain/roles';
import { serve } from '$lib/server/http/serve';
import { logHead } from '$lib/server/log/head';
import { may } from '$lib/server/people/allow';
import { reviewsDue } from '$lib/server/register/reviews';
import type { LayoutServerLoad } from './$types';

/** What every signed-in page carries: who reads, the coming dates, the folio. */
export const load: LayoutServerLoad = (event) =>
	serve(event, (ctx, actor) => {
		const { size, at } = logHead(ctx.read);
		const name = ctx.people.names([actor.person]).get(actor.person) ?? actor.person;
		const seesWholeLog = may(ctx, ctx.read, actor, 'log.read');
		return {
			who: { label: `${name} · ${roleWords(actor.roles)}`, href: '/account' },
			today: ctx.now().toISOString().slice(0, 10),
			marks: reviewsDue(ctx, actor).map(({ model, name: of, due }) => ({
				date: due.date,
				label: `review of ${model} ${of}`,
				href: `/models/${model}`,
				overdue: due.overdue
			})),
			// Those who may read all of it, and those who see the part about their own models.
			seesLog:
				seesWholeLog ||
				(actor.person.startsWith('p_') && ctx.facts.parties(ctx.read, actor.person as PersonId).length > 0),
			// Pages link the folio of an entry about no model only for those who can open it.
			seesWholeLog,
			seesPeople: may(ctx, ctx.read, actor, 'people.read'),
			folio: size - 1,
			at
		};
	});
