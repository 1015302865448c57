import type { Actor } from '$lib/domain/actor';
import { Absent } from '$lib/domain/faults';
import { forms } from '$lib/domain/references';
import type { Ctx } from '$lib/server/context';
import { serve } from '$lib/server/http/serve';
import { compareRuns, runEvidence, type RunEvidence } from '$lib/server/runs/compare';
import { listRuns } from '$lib/server/runs/run-list';
import { equationOfEstimates, equationOfSpecification } from '$lib/ui/estimated-equation';
import type { RunSide } from '$lib/ui/report/compare-rows';
import { equationDecimals } from '$lib/ui/report/estimate-rows';
import { statusWords } from '$lib/ui/report/run-facts';
import type { PageServerLoad } from './$types';

/** How many runs the form offers. */
const mostOffered = 200;

const evidence = (ctx: Ctx, actor: Actor, ref: string): RunEvidence => {
	if (!forms.run.test(ref)) throw new Absent(`There is no run ${ref.slice(0, 40)}.`);
	return runEvidence(ctx, actor, ref);
};

const sideOf = ({ view, result }: RunEvidence): RunSide => {
	const { specification, estimates } = result;
	const equation = estimates?.equation;
	return {
		ref: view.ref,
		status: statusWords(view).replace(`${view.ref} · `, ''),
		version: view.version,
		vintage: view.vintage,
		digest: result.digest,
		sample: equation ? `${equation.firstPeriod} to ${equation.lastPeriod}, n = ${equation.fit.n}` : '',
		equation: estimates
			? equationOfEstimates(specification, estimates)
			: equationOfSpecification(specification),
		decimals: estimates ? equationDecimals(estimates) : 3
	};
};

const offered = (ctx: Ctx, actor: Actor) =>
	listRuns(ctx, actor, { state: 'finished', limit: mostOffered }).runs.map(
		({ ref, model, version, vintage, purpose, requestedAt }) => ({
			value: ref,
			label: `${ref} · ${purpose} · ${version} on ${vintage} · ${requestedAt.slice(0, 10)}`,
			model
		})
	);

/** Two runs by `?a=R-0001&b=R-0002`; a form where either is missing. */
export const load: PageServerLoad = (event) =>
	serve(event, (ctx, actor) => {
		const [a, b] = [event.url.searchParams.get('a') ?? '', event.url.searchParams.get('b') ?? ''];
		if (a === '' || b === '') return { a, b, offered: offered(ctx, actor), compared: null };
		const [left, right] = [evidence(ctx, actor, a), evidence(ctx, actor, b)];
		return {
			a,
			b,
			offered: [],
			compared: {
				...compareRuns(left, right),
				sides: [sideOf(left), sideOf(right)]
			}
		};
	});
