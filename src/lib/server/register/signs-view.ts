import type { Actor } from '$lib/domain/actor';
import type { Sign } from '$lib/domain/specification';
import { allow } from '$lib/server/people/allow';
import type { Ctx } from '../context';
import type { Handle } from '../db/handle';
import { priorsOf } from './register.queries';
import { estimatesSeen } from './signs';

/** One declaration of one driver, as it was made. */
export interface DeclarationView {
	readonly n: number;
	readonly side: 'owner' | 'validator';
	readonly series: string;
	readonly sign: Sign;
	readonly low: number;
	readonly high: number;
	readonly rationale: string;
	/** Declared when claims or runs of the model existed already. */
	readonly late: boolean;
	readonly at: string;
	readonly by: string;
	readonly entry: number;
	/** A later declaration of the same side stands for the driver now. */
	readonly replaced: boolean;
}

export interface SignsView {
	readonly model: string;
	/** Every declaration, oldest first; none is ever removed. */
	readonly declarations: readonly DeclarationView[];
	/** Those in force, the owner's first. */
	readonly inForce: readonly DeclarationView[];
	/** A declaration made from now on will be flagged as late. */
	readonly estimatesSeen: boolean;
}

/** The declared signs and plausible ranges of a model, with all that was declared before. */
export const signsOf = (ctx: Ctx, actor: Actor, model: string, handle: Handle = ctx.read): SignsView => {
	allow(ctx, handle, actor, 'model.read', { model });
	const rows = handle.all(priorsOf(handle.q, model));
	const names = ctx.people.names(rows.map(({ by }) => by as `p_${string}`));
	const declarations = rows.map((row): DeclarationView =>
		Object.freeze({
			n: row.n,
			side: row.side,
			series: row.series,
			sign: row.sign,
			low: row.low,
			high: row.high,
			rationale: row.rationale,
			late: row.late === 1,
			at: row.at,
			by: names.get(row.by) ?? row.by,
			entry: row.entry,
			replaced: rows.some(
				(later) => later.side === row.side && later.series === row.series && later.n > row.n
			)
		})
	);
	const inForce = declarations.filter(({ replaced }) => !replaced);
	return Object.freeze({
		model,
		declarations,
		inForce: [...inForce].sort((a, b) => a.side.localeCompare(b.side) || a.n - b.n),
		estimatesSeen: estimatesSeen(handle, model)
	});
};
