import { z } from 'zod';
import { digest } from './digest';
import { event } from './event';

const ref = z.string();
const person = z.string();
/** The score chosen for each of the policy's questions. */
const answers = z.array(
	z.strictObject({ question: z.enum(['materiality', 'complexity']), score: z.number() })
);
const relation = z.enum(['owner', 'developer', 'validator']);

/** A declaration for one driver: what the bank expects before it has seen an estimate. */
const declaration = z.strictObject({
	series: z.string(),
	sign: z.enum(['+', '-', 'any']),
	low: z.number(),
	high: z.number(),
	rationale: z.string()
});

const drafted = z.strictObject({
	version: ref,
	model: ref,
	/** The whole specification, in its own versioned schema. */
	specification: z.record(z.string(), z.unknown()),
	digest: digest(),
	reason: z.string(),
	predecessor: ref.optional()
});

/** Events of the register room. */
export const registerEvents = {
	'model.registered': event(1, {
		1: z.strictObject({
			model: ref,
			name: z.string(),
			purpose: z.string(),
			portfolio: z.string(),
			uses: z.array(z.string()),
			owner: person,
			developers: z.array(person),
			answers
		})
	}),
	'model.edited': event(1, {
		1: z.strictObject({
			model: ref,
			name: z.string().exactOptional(),
			purpose: z.string().exactOptional(),
			portfolio: z.string().exactOptional(),
			uses: z.array(z.string()).optional(),
			answers: answers.optional()
		})
	}),
	'party.started': event(1, { 1: z.strictObject({ model: ref, person, relation }) }),
	'party.ended': event(1, { 1: z.strictObject({ model: ref, person, relation }) }),
	'tier.confirmed': event(1, {
		1: z.strictObject({ model: ref, tier: z.number(), proposed: z.number(), reason: z.string().optional() })
	}),
	'tier.override-proposed': event(1, {
		1: z.strictObject({ model: ref, tier: z.number(), proposed: z.number(), reason: z.string() })
	}),
	'tier.overridden': event(1, {
		1: z.strictObject({ model: ref, tier: z.number(), reason: z.string(), proposedBy: person })
	}),
	'prior.declared': event(1, {
		1: z.strictObject({
			model: ref,
			n: z.number(),
			side: z.enum(['owner', 'validator']),
			/** True when a version had claims, or a run existed, before this declaration. */
			late: z.boolean(),
			drivers: z.array(declaration)
		})
	}),
	'version.drafted': event(1, { 1: drafted }),
	'version.revised': event(1, { 1: drafted }),
	'version.submitted': event(1, { 1: z.strictObject({ version: ref, model: ref, digest: digest() }) }),
	'version.withdrawn': event(1, { 1: z.strictObject({ version: ref, model: ref, reason: z.string() }) })
} as const;
