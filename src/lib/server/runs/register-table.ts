import type { Actor } from '$lib/domain/actor';
import type { ModelLine } from '$lib/server/register/model-list';
import { listModels } from '$lib/server/register/model-list';
import type { Ctx } from '../context';
import type { Handle } from '../db/handle';
import type { Schema } from '../db/schema';
import type { Headline } from './headline';
import { latestFinished } from './runs.queries';

/** The newest finished planned run of a model, as the register's table shows it. */
export interface LatestRun {
	readonly run: string;
	readonly version: string;
	readonly query: number;
	readonly fails: number;
	readonly notAssessable: number;
	/** Equilibrium error in standard deviations, with the periods before. */
	readonly gap?: number;
	readonly gapPeriod?: string;
	readonly gapBefore?: readonly number[];
	readonly speed?: number;
}

export interface RegisterLine extends ModelLine {
	readonly latest?: LatestRun;
}

const latestOf = (row: Schema['run']): LatestRun => {
	const { gap, gapPeriod, gapBefore, speed } = JSON.parse(row.headline ?? '{}') as Headline;
	return Object.freeze({
		run: row.ref,
		version: row.version,
		query: row.query ?? 0,
		fails: row.fails ?? 0,
		notAssessable: row.not_assessable ?? 0,
		...(gap !== undefined && { gap }),
		...(gapPeriod !== undefined && { gapPeriod }),
		...(gapBefore !== undefined && { gapBefore }),
		...(speed !== undefined && { speed })
	});
};

/** Every model with the headline of its newest planned run, where the reader sees the model whole. */
export const registerTable = (ctx: Ctx, actor: Actor, handle: Handle = ctx.read): readonly RegisterLine[] => {
	const lines = listModels(ctx, actor, handle);
	const latest = new Map(handle.all(latestFinished(handle.q, 'planned')).map((row) => [row.model, row]));
	return lines.map((line): RegisterLine => {
		const row = line.whole && latest.get(line.ref);
		return row ? Object.freeze({ ...line, latest: latestOf(row) }) : line;
	});
};
