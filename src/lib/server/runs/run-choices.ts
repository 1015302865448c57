import type { Actor } from '$lib/domain/actor';
import { purposes, type Purpose } from '$lib/domain/permission-table';
import type { Policy } from '$lib/domain/policy';
import { linePath, levelPath } from '$lib/domain/policy';
import { vintagesOfModel } from '$lib/server/lineage/read';
import { may } from '$lib/server/people/allow';
import { adoptedPolicy } from '$lib/server/policy/policy';
import type { Ctx } from '../context';

/** A policy line that a run may replace, with what stands there. */
export interface SettingChoice {
	readonly setting: string;
	readonly says: string;
	readonly value: string;
}

/** What the form that starts a run offers its reader. */
export interface RunChoices {
	readonly purposes: readonly Purpose[];
	readonly vintages: readonly { readonly ref: string; readonly words: string }[];
	readonly settings: readonly SettingChoice[];
}

const overridable = (policy: Policy): SettingChoice[] => {
	const lines = [
		...Object.entries(policy.levels).map(([name, line]) => ({ path: levelPath(name), line, title: '' })),
		...Object.entries(policy.checks).flatMap(([check, { title, lines: own }]) =>
			Object.entries(own).map(([name, line]) => ({ path: linePath(check, name), line, title: `${title}: ` }))
		)
	];
	return lines
		.filter(({ line }) => line.overridable)
		.map(({ path, line, title }) => ({
			setting: path,
			says: `${title}${line.says}`,
			value: Array.isArray(line.value) ? line.value.join(', ') : String(line.value)
		}));
};

/** Purposes the reader may start on the model, its vintages, and the settings a run may replace. */
export const runChoices = (
	ctx: Ctx,
	actor: Actor,
	model: string,
	state: 'draft' | 'submitted' | 'withdrawn'
): RunChoices => {
	const open = (purpose: Purpose): boolean =>
		(state === 'submitted' || (state === 'draft' && purpose === 'exploratory')) &&
		may(ctx, ctx.read, actor, 'run.start', { model, purpose });
	return Object.freeze({
		purposes: purposes.filter(open),
		vintages: vintagesOfModel(ctx.read, model).map(({ ref, from, to, vintageDate }) => ({
			ref,
			words: `${ref}, ${from} to ${to}, vintage of ${vintageDate}`
		})),
		settings: overridable(adoptedPolicy(ctx, ctx.read).policy)
	});
};
