import type { Actor } from '$lib/domain/actor';
import type { SeasonalAdjustment } from '$lib/domain/lineage';
import type { Ctx } from '../context';
import type { Handle } from '../db/handle';
import { allow, may } from '../people/allow';
import { allSeries, usesOfSeries } from './lineage.queries';

/** One series of the dictionary, and where the reader may see it used. */
export interface SeriesRow {
	readonly id: string;
	readonly source: string;
	readonly code: string;
	readonly label: string;
	readonly unit: string;
	readonly seasonal: SeasonalAdjustment;
	/** Vintages that carry it, oldest first, and the day of the latest. */
	readonly vintages: readonly string[];
	readonly latest: string;
	readonly models: readonly string[];
}

/** The dictionary of series that models share; a series used only by models the reader may not see is not listed. */
export const seriesDictionary = (ctx: Ctx, actor: Actor, handle: Handle = ctx.read): readonly SeriesRow[] => {
	allow(ctx, handle, actor, 'register.read');
	const readable = new Map<string, boolean>();
	const mayRead = (model: string): boolean => {
		let known = readable.get(model);
		if (known === undefined) readable.set(model, (known = may(ctx, handle, actor, 'data.read', { model })));
		return known;
	};
	const uses = handle.all(usesOfSeries(handle.q)).filter(({ model }) => mayRead(model));
	return handle.all(allSeries(handle.q)).flatMap((row): SeriesRow[] => {
		const own = uses.filter(({ series }) => series === row.id);
		if (own.length === 0) return [];
		return [
			{
				id: row.id,
				source: row.source,
				code: row.code,
				label: row.label,
				unit: row.unit,
				seasonal: row.seasonal,
				vintages: [...new Set(own.map(({ vintage }) => vintage))],
				latest: own.map((use) => use.vintage_date).reduce((a, b) => (a > b ? a : b)),
				models: [...new Set(own.map(({ model }) => model))].sort()
			}
		];
	});
};
