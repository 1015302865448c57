import { z } from 'zod';
import { textFault, type TextKind } from '$lib/chain/text';
import { Invalid } from './faults';
import { nameSchema, signs } from './specification';

/** Text as the log keeps it: trimmed, in Unicode form NFC, without control characters. */
const text = (kind: TextKind, max: number, missing: string) =>
	z
		.string(missing)
		.transform((typed) => typed.replace(/\r\n?/g, '\n').normalize('NFC').trim())
		.pipe(
			z
				.string()
				.min(1, missing)
				.max(max, `Keep it to ${max} characters.`)
				.superRefine((value, issues) => {
					const fault = textFault(value, kind);
					if (fault !== undefined) issues.addIssue({ code: 'custom', message: `The text ${fault}.` });
				})
		);

export const reasonSchema = text('long', 2000, 'Give the reason.');

const finite = z.coerce.number<number>('Write a number.').refine(Number.isFinite, 'Write a finite number.');
const score = z.coerce
	.number<number>('Choose an answer.')
	.int('Choose an answer.')
	.min(1, 'Choose an answer.');
const person = z.string().regex(/^p_[a-z2-7]{26}$/, 'Choose a person.');
const uses = z
	.array(text('name', 80, 'Name the use.'))
	.max(20, 'At most 20 uses.')
	.transform((all) => [...new Set(all)]);

/** What a registration says of a model. */
export const modelInputSchema = z.strictObject({
	name: text('name', 120, 'Name the model.'),
	purpose: text('long', 4000, 'Say what the model is for.'),
	portfolio: text('name', 200, 'Name the portfolio the model covers.'),
	uses: uses.refine((all) => all.length > 0, 'Name at least one use.'),
	materiality: score,
	complexity: score,
	owner: person.optional(),
	developers: z.array(person).max(20).default([])
});
export type ModelInput = z.input<typeof modelInputSchema>;

export const modelEditSchema = modelInputSchema.omit({ owner: true, developers: true }).partial();
export type ModelEdit = z.input<typeof modelEditSchema>;

/** What is expected of one driver before any estimate is seen. */
export const declarationSchema = z
	.strictObject({
		series: nameSchema,
		sign: z.enum(signs, 'Choose a sign.'),
		low: finite,
		high: finite,
		rationale: text('long', 2000, 'Say why: through which channel the driver acts.')
	})
	.refine(({ low, high }) => low <= high, { path: ['high'], message: 'The range ends below its beginning.' })
	.refine(({ sign, high }) => sign !== '+' || high > 0, {
		path: ['high'],
		message: 'With a positive sign the range must reach above zero.'
	})
	.refine(({ sign, low }) => sign !== '-' || low < 0, {
		path: ['low'],
		message: 'With a negative sign the range must reach below zero.'
	});
export type Declaration = z.infer<typeof declarationSchema>;

export const declarationsSchema = z
	.array(declarationSchema)
	.min(1, 'Declare at least one driver.')
	.max(24, 'At most 24 drivers.')
	.superRefine((all, issues) => {
		all.forEach(({ series }, i) => {
			if (all.findIndex((each) => each.series === series) !== i)
				issues.addIssue({ code: 'custom', path: [i, 'series'], message: `${series} stands here twice.` });
		});
	});

const pointerOf = (path: readonly PropertyKey[]): string =>
	path.map((key) => `/${String(key).replaceAll('~', '~0').replaceAll('/', '~1')}`).join('');

/**
 * The input as its schema reads it.
 * @throws Invalid with a JSON pointer under `at` and a sentence for each thing wrong
 */
export const taken = <S extends z.ZodType>(schema: S, input: unknown, at = ''): z.output<S> => {
	const parsed = schema.safeParse(input);
	if (parsed.success) return parsed.data;
	throw new Invalid(
		parsed.error.issues.map(({ path, message }) => ({ pointer: `${at}${pointerOf(path)}`, message }))
	);
};
