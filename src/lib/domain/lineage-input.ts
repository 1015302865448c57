import { z } from 'zod';
import { textFault } from '$lib/chain/text';
import { forms } from './references';
import { choicesSchema, columnRoles, limits, seasonalAdjustments } from './lineage';

/** One line of text as the log keeps it: trimmed, in Unicode form NFC, without control or direction marks. */
const line = (max: number) =>
	z
		.string()
		.transform((typed) => typed.normalize('NFC').trim())
		.pipe(
			z
				.string()
				.max(max, `Keep it to ${max} characters.`)
				.superRefine((value, issues) => {
					const fault = textFault(value, 'name');
					if (fault !== undefined) issues.addIssue({ code: 'custom', message: `The text ${fault}.` });
				})
		);

/** A field left empty in a form is a field not given. */
const optional = <S extends z.ZodType<string>>(schema: S) =>
	schema.optional().transform((text) => (text === '' ? undefined : text));

/** A calendar date that exists. */
const day = z.iso.date('Write the date as 2026-03-31.');

const columnInput = z
	.strictObject({
		/** The column's name in the file. */
		column: z.string(),
		role: z.enum(columnRoles, 'Say whether the column is used.'),
		unit: optional(line(60)),
		source: optional(line(120)),
		code: optional(line(80)),
		vintageDate: z.union([day, z.literal('')]).optional(),
		seasonal: z.enum(seasonalAdjustments).default('unknown'),
		notes: optional(line(200))
	})
	.superRefine(({ column, role, unit, source }, issues) => {
		if (role === 'left-out') return;
		if (unit === undefined)
			issues.addIssue({ code: 'custom', path: ['unit'], message: `Give the unit of ${column}.` });
		if (source === undefined)
			issues.addIssue({ code: 'custom', path: ['source'], message: `Name the provider of ${column}.` });
	});

/** What a person says of a file when confirming its preview. */
export const vintageInputSchema = z
	.strictObject({
		upload: z.string(),
		/** Digest of the file as previewed. */
		sha256: z.string(),
		choices: choicesSchema.default({}),
		/** An existing dataset that gets a new vintage; absent: a new dataset called `name`. */
		dataset: optional(z.string()).refine(
			(ref) => ref === undefined || forms.dataset.test(ref),
			'Choose a dataset.'
		),
		name: optional(line(120)),
		/** Day on which the figures were taken from their source. */
		vintageDate: day,
		columns: z.array(columnInput).min(1, 'Say which columns are used.').max(limits.columns)
	})
	.superRefine(({ dataset, name, columns }, issues) => {
		if (dataset === undefined && name === undefined)
			issues.addIssue({ code: 'custom', path: ['name'], message: 'Name the dataset, or choose one.' });
		columns.forEach(({ column }, i) => {
			if (columns.findIndex((each) => each.column === column) !== i)
				issues.addIssue({
					code: 'custom',
					path: ['columns', i, 'column'],
					message: `${column} stands here twice.`
				});
		});
		if (!columns.some(({ role }) => role === 'observed'))
			issues.addIssue({ code: 'custom', path: ['columns'], message: 'Use at least one column.' });
	});
export type VintageInput = z.input<typeof vintageInputSchema>;
export type VintageTaken = z.output<typeof vintageInputSchema>;
export type ColumnTaken = VintageTaken['columns'][number];
