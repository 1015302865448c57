import { z } from 'zod';
import { lineSchema } from './policy';
import { specificationSchema } from './specification';

export const verdicts = ['holds', 'query', 'fails', 'not assessable'] as const;
export type Verdict = (typeof verdicts)[number];

export const purposes = ['planned', 'validation', 'exploratory'] as const;
export type Purpose = (typeof purposes)[number];

const digest = z.string().regex(/^sha256:[0-9a-f]{64}$/);

/** A policy line replaced for one run, with the reason. */
export const overrideSchema = z.strictObject({
	/** Path of the policy line, as in `thresholdFrom`. */
	setting: z.string(),
	value: lineSchema.shape.value,
	reason: z.string().trim().min(1).max(2000)
});
export type Override = z.infer<typeof overrideSchema>;

/** Values in use, held fixed against this data: the approved relation and the last period it was estimated on. */
export const heldSchema = z.strictObject({
	version: z.string(),
	constant: z.number(),
	trend: z.number().optional(),
	slopes: z.array(z.strictObject({ series: z.string(), value: z.number() })),
	/** Last period of the sample the values were estimated on. */
	through: z.string()
});

/** Everything a run depends on; its result is a pure function of this and of the bytes behind `vintage`. */
export const runRequestSchema = z.strictObject({
	specification: specificationSchema,
	vintage: digest,
	policy: digest,
	/** Tier whose battery is run. */
	tier: z.int().min(1),
	settings: z.array(overrideSchema).max(50),
	seed: z.int().min(0).max(4294967295),
	purpose: z.enum(purposes),
	held: heldSchema.optional(),
	engine: z.string()
});
export type RunRequest = z.infer<typeof runRequestSchema>;
