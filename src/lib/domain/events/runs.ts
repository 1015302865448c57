import { z } from 'zod';
import { blobDigest, digest } from './digest';
import { event } from './event';

const verdict = z.enum(['holds', 'query', 'fails', 'not assessable']);
const value = z.union([z.number(), z.string(), z.boolean(), z.array(z.number()), z.array(z.string())]);

/** How many checks, or groups of checks, ended in each verdict. */
const counts = z.strictObject({
	holds: z.number(),
	query: z.number(),
	fails: z.number(),
	notAssessable: z.number()
});

/** The few numbers lists show; the whole result lies behind its digest. */
const headline = z.strictObject({
	n: z.number().optional(),
	from: z.string().optional(),
	to: z.string().optional(),
	/** Speed of adjustment, positive, and its standard error. */
	speed: z.number().optional(),
	speedSe: z.number().optional(),
	halfLife: z.number().optional(),
	/** Equilibrium error in standard deviations: the last period, and those before it, oldest first. */
	gap: z.number().optional(),
	gapPeriod: z.string().optional(),
	gapBefore: z.array(z.number()).optional()
});

/** Events of the runs room. */
export const runsEvents = {
	'run.requested': event(1, {
		1: z.strictObject({
			run: z.string(),
			model: z.string(),
			version: z.string(),
			vintage: z.string(),
			/** Of the exact bytes of the vintage's file. */
			file: blobDigest(),
			/** Of the parsed table the numbers come from. */
			table: blobDigest(),
			policy: digest(),
			tier: z.number(),
			settings: z.array(z.strictObject({ setting: z.string(), value, reason: z.string() })),
			seed: z.number(),
			purpose: z.enum(['planned', 'validation', 'exploratory']),
			engine: z.string(),
			/** Digest of the canonical request, which is also the blob that holds it. */
			request: blobDigest()
		})
	}),
	'run.finished': event(1, {
		1: z.strictObject({
			run: z.string(),
			/** Blob of the whole result. */
			result: blobDigest(),
			/** Of numbers, verdicts, parameters and reasons at 10 significant digits: equal for an equal request. */
			resultDigest: digest(),
			checks: counts,
			groups: z.array(z.strictObject({ group: z.string(), verdict })),
			headline
		})
	}),
	'run.failed': event(1, { 1: z.strictObject({ run: z.string(), sentence: z.string() }) }),
	'run.cancelled': event(1, { 1: z.strictObject({ run: z.string() }) })
} as const;
