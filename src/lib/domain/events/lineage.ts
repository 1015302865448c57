import { z } from 'zod';
import { choicesSchema, columnRoles, seasonalAdjustments } from '../lineage';
import { frequencies } from '../period';
import { blobDigest, digest } from './digest';
import { event } from './event';

const ref = z.string();
const day = z.string();

const note = z.strictObject({
	code: z.string(),
	message: z.string(),
	column: z.string().optional(),
	period: z.string().optional()
});

/** Where the figures of one column come from. Columns left out carry their name alone. */
const column = z.strictObject({
	name: z.string(),
	role: z.enum(columnRoles),
	/** Key of the series in the dictionary that models share. */
	series: z.string().optional(),
	unit: z.string().optional(),
	source: z.string().optional(),
	code: z.string().optional(),
	vintageDate: day.optional(),
	seasonal: z.enum(seasonalAdjustments).optional(),
	notes: z.string().optional()
});

/** Events of the lineage room. */
export const lineageEvents = {
	'dataset.opened': event(1, { 1: z.strictObject({ dataset: ref, model: ref, name: z.string() }) }),
	'dataset.attached': event(1, { 1: z.strictObject({ dataset: ref, model: ref }) }),
	'vintage.stored': event(1, {
		1: z.strictObject({
			vintage: ref,
			dataset: ref,
			n: z.number(),
			model: ref,
			/** The exact bytes of the file. */
			sha256: blobDigest(),
			/** The table read from them, canonical: what runs depend on. */
			table: blobDigest(),
			size: z.number(),
			media: z.enum(['csv', 'xlsx']),
			fileName: z.string(),
			vintageDate: day,
			choices: choicesSchema,
			frequency: z.enum(frequencies),
			from: z.string(),
			to: z.string(),
			observations: z.number(),
			columns: z.array(column),
			/** How the file was read, and what is odd in it. */
			notes: z.array(note)
		})
	}),
	/** A file that was not taken; its name may speak of people and is not kept. */
	'upload.refused': event(1, {
		1: z.strictObject({
			model: ref,
			code: z.string(),
			issues: z.number(),
			size: z.number(),
			sha256: digest().optional()
		})
	})
} as const;
