import { z } from 'zod';
import { purposes } from './permission-table';
import { lineSchema } from './policy';
import { specificationSchema } from './specification';

export const verdicts = ['holds', 'query', 'fails', 'not assessable'] as const;
export type Verdict = (typeof verdicts)[number];

/** Why something was not assessed; closed list, the sentence beside it says the rest. */
export const reasons = [
	'non-finite',
	'domain',
	'gap',
	'duplicate',
	'frequency',
	'constant',
	'too-short',
	'rank',
	'perfect-fit',
	'empty-trim',
	'first-rows',
	'no-variance',
	'lag',
	'table',
	'no-scenario',
	'not-observable',
	'needs-cointegration',
	'no-approved-version',
	'no-horizon',
	'given'
] as const;
export type Reason = (typeof reasons)[number];

export { purposes, type Purpose } from './permission-table';

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
	/** Slope per period, counted from 1 at the first period of this run's sample. */
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
