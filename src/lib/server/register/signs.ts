import { z } from 'zod';
import type { Actor } from '$lib/domain/actor';
import { Refused } from '$lib/domain/faults';
import { declarationsSchema, taken } from '$lib/domain/register-input';
import { undeclared, type DeclaredSign } from '$lib/domain/register-signs';
import type { Specification } from '$lib/domain/specification';
import { record } from '$lib/server/log/record';
import { allow } from '$lib/server/people/allow';
import type { Ctx } from '../context';
import type { Handle } from '../db/handle';
import { anyRunOf, lastPrior, priorsOf, versionsOf } from './register.queries';

export const sides = ['owner', 'validator'] as const;
export type Side = (typeof sides)[number];

const declaring = z.strictObject({
	model: z.string(),
	side: z.enum(sides).default('owner'),
	drivers: declarationsSchema
});

/** Whether estimates of the model have been seen: a version made claims, or a run was started. */
export const estimatesSeen = (handle: Handle, model: string): boolean =>
	handle.first(anyRunOf(handle.q, model)) !== undefined ||
	handle
		.all(versionsOf(handle.q, model))
		.some(({ specification }) => (JSON.parse(specification) as Specification).claimed !== undefined);

/** The latest declaration of each series on one side. */
export const signsInForce = (handle: Handle, model: string, side: Side): readonly DeclaredSign[] => {
	const latest = new Map<string, DeclaredSign>();
	for (const row of handle.all(priorsOf(handle.q, model))) if (row.side === side) latest.set(row.series, row);
	return [...latest.values()].map(({ series, sign, low, high }) => ({ series, sign, low, high }));
};

/**
 * Declares the expected sign and plausible range of drivers: before any claim or run, or later as a change that stands
 * beside the first declaration and is flagged.
 * @returns the number of the declaration, from 1
 */
export const declareSigns = (ctx: Ctx, actor: Actor, input: z.input<typeof declaring>): number => {
	const { model, side, drivers } = taken(declaring, input);
	return ctx.write((tx) => {
		const grant = allow(ctx, tx, actor, side === 'owner' ? 'driver.declare' : 'prior.declare', { model });
		const n = (tx.first(lastPrior(tx.q, model))?.n ?? 0) + 1;
		record(ctx, tx, actor, grant, {
			type: 'prior.declared',
			subjects: [model],
			payload: { model, n, side, late: estimatesSeen(tx, model), drivers }
		});
		return n;
	});
};

/**
 * Signs come first: claims, submissions and runs wait until every driver of the specification was declared.
 * @throws Refused by the rule `signs-first`
 */
export const requireSigns = (
	handle: Handle,
	model: string,
	specification: Specification,
	action: string
): readonly DeclaredSign[] => {
	const declared = signsInForce(handle, model, 'owner');
	const missing = undeclared(specification, declared);
	if (missing.length > 0)
		throw new Refused(
			'signs-first',
			action,
			`Declare the expected sign and plausible range of ${missing.join(', ')} first: claims and runs come after.`,
			true,
			model
		);
	return declared;
};
