import { serve } from '$lib/server/http/serve';
import { may } from '$lib/server/people/allow';
import { registerTable } from '$lib/server/runs/register-table';
import type { PageServerLoad } from './$types';

/** What the filters offer, over the whole register, whatever is shown of it. */
export const load: PageServerLoad = (event) =>
	serve(event, (ctx, actor) => {
		const lines = registerTable(ctx, actor);
		const distinct = <T>(values: readonly T[]): T[] => [...new Set(values)].sort();
		return {
			total: lines.length,
			overdue: lines.filter(({ whole }) => whole?.due?.overdue).length,
			tiers: distinct(lines.map(({ tier }) => tier)),
			owners: distinct(lines.flatMap(({ whole }) => whole?.owners ?? [])),
			states: distinct(lines.map(({ state }) => state)),
			mayRegister: may(ctx, ctx.read, actor, 'model.register')
		};
	});
