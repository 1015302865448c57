import { redirect, type RequestEvent } from '@sveltejs/kit';
import { fail, superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { z } from 'zod';
import { Invalid } from '$lib/domain/faults';
import { part } from '$lib/domain/references';
import { namedTerms } from '$lib/domain/register-term-names';
import { stepsText } from '$lib/domain/register-steps';
import type { Purpose } from '$lib/domain/permission-table';
import { refuseWith } from '$lib/server/http/faults';
import { serve, signedIn } from '$lib/server/http/serve';
import { submit } from '$lib/server/http/submit';
import { modelSheet } from '$lib/server/register/model-sheet';
import { submitVersion, withdrawVersion } from '$lib/server/register/version';
import { compareVersions, versionOf, versionsOfModel } from '$lib/server/register/version-view';
import { requestRun } from '$lib/server/runs/request';
import { runChoices } from '$lib/server/runs/run-choices';
import { latestRun, runsOnVersion } from '$lib/server/runs/run-list';
import { resultOf } from '$lib/server/runs/run-view';
import type { Actions, PageServerLoad } from './$types';
import { runForm, settingRows, settingsOf } from './run-form';

const withdrawForm = z.object({ reason: z.string() });
const blank = (): string[] => Array.from({ length: settingRows }, () => '');

export const load: PageServerLoad = (event) =>
	serve(event, async (ctx, actor) => {
		const { model, n } = event.params;
		const version = versionOf(ctx, actor, part(model, Number(n)));
		const { name } = modelSheet(ctx, actor, model);
		const others = versionsOfModel(ctx, actor, model).filter(({ ref }) => ref !== version.ref);
		const asked = event.url.searchParams.get('against');
		const against = others.find(({ ref }) => ref === (asked ?? version.predecessor))?.ref;
		const latest = latestRun(ctx, actor, model, version.ref);
		const choices = runChoices(ctx, actor, model, version.state);
		return {
			name,
			version,
			terms: namedTerms(version.specification),
			transforms: version.specification.series.map(({ transform }) => stepsText(transform)),
			others: others.map(({ ref }) => ref),
			against,
			differences: against === undefined ? [] : compareVersions(ctx, actor, against, version.ref),
			runs: runsOnVersion(ctx, actor, version.ref),
			latest: latest && { ref: latest.ref, estimates: resultOf(ctx, actor, latest.ref).estimates },
			choices,
			run: await superValidate(
				{
					vintage: choices.vintages[0]?.ref ?? '',
					purpose: choices.purposes[0] ?? '',
					seed: '1',
					setting: blank(),
					value: blank(),
					why: blank()
				},
				zod4(runForm),
				{ errors: false }
			),
			withdraw: await superValidate(zod4(withdrawForm))
		};
	});

/** `/settings/1/reason` of the verb is `/why/1` of the form. */
const columnOf: Readonly<Record<string, string>> = { setting: 'setting', value: 'value', reason: 'why' };
const inForm = (issues: Invalid['issues'], rows: readonly number[]): Invalid['issues'] =>
	issues.map((issue) => {
		const [, at, column] = /^\/settings\/(\d+)\/(\w+)/.exec(issue.pointer) ?? [];
		const row = at === undefined ? undefined : rows[Number(at)];
		return row === undefined
			? issue
			: { ...issue, pointer: `/${columnOf[column ?? ''] ?? 'setting'}/${row}` };
	});

const versionRef = ({ params }: RequestEvent<{ model: string; n: string }>): string =>
	part(params.model, Number(params.n));

export const actions: Actions = {
	submit: (event) => {
		const ref = versionRef(event);
		try {
			submitVersion(event.locals.ctx, signedIn(event), ref);
		} catch (fault) {
			if (fault instanceof Invalid) return fail(400, { issues: fault.issues.map(({ message }) => message) });
			return refuseWith(event, fault);
		}
		redirect(303, event.url.pathname);
	},
	withdraw: async (event) => {
		const form = await superValidate(event.request, zod4(withdrawForm));
		const answer = await submit(event, form, (ctx, actor, { reason }) => {
			withdrawVersion(ctx, actor, versionRef(event), reason);
			return true as const;
		});
		if (answer !== true) return answer;
		redirect(303, event.url.pathname);
	},
	run: async (event) => {
		const form = await superValidate(event.request, zod4(runForm));
		const rows = form.data.setting.flatMap((line, i) => (line === '' ? [] : [i]));
		const answer = await submit(event, form, (ctx, actor, data) => {
			try {
				return requestRun(ctx, actor, {
					version: versionRef(event),
					vintage: data.vintage,
					purpose: data.purpose as Purpose,
					seed: Number(data.seed),
					settings: settingsOf(data)
				});
			} catch (fault) {
				throw fault instanceof Invalid ? new Invalid(inForm(fault.issues, rows)) : fault;
			}
		});
		if (typeof answer !== 'string') return answer;
		redirect(303, `/runs/${answer}`);
	}
};
