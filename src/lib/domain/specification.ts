import { z } from 'zod';
import { frequencies } from './period';

/** Names of series and dummies: they become parts of regressor codes, so neither dots nor blanks. */
export const nameSchema = z
	.string()
	.regex(
		/^[\p{L}][\p{L}\p{N}_]{0,31}$/u,
		'A name begins with a letter and holds letters, digits and _ only.'
	);

const words = z.string().trim().min(1).max(2000);
const finite = z.number().refine(Number.isFinite, 'A finite number is needed.');
const span = z.int().min(2).max(120);

/** One step of a transform chain; steps are applied in order, each refuses for itself. */
export const stepSchema = z.discriminatedUnion('step', [
	z.strictObject({ step: z.literal('log') }),
	z.strictObject({ step: z.literal('logit') }),
	z.strictObject({ step: z.literal('diff') }),
	z.strictObject({ step: z.literal('yoy') }),
	z.strictObject({ step: z.literal('log-diff') }),
	z.strictObject({ step: z.literal('log-yoy') }),
	z.strictObject({
		step: z.literal('scale'),
		by: finite.refine((k) => k !== 0, 'Scaling by 0 leaves nothing.')
	}),
	z.strictObject({ step: z.literal('ratio'), column: words }),
	z.strictObject({ step: z.literal('deflate'), column: words }),
	z.strictObject({ step: z.literal('mean'), of: span }),
	z.strictObject({ step: z.literal('sum'), of: span }),
	z.strictObject({ step: z.literal('lag'), by: z.int().min(1).max(120) })
]);
export type TransformStep = z.infer<typeof stepSchema>;

export const signs = ['+', '-', 'any'] as const;
const sign = z.enum(signs);
const period = z.string().max(10);
const lags = (least: number) => z.array(z.int().min(least).max(36)).max(37);
/** A decimal number as typed: its digits say how exactly it was claimed. */
const decimal = z
	.string()
	.regex(
		/^[+\-\u2212]?(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d{1,3})?$/,
		'Write the number with its digits, as in 0.1870.'
	);

export const seriesSchema = z.strictObject({
	name: nameSchema,
	column: words,
	unit: z.string().trim().max(100),
	transform: z.array(stepSchema).max(8)
});

const longRun = z.strictObject({
	drivers: z
		.array(
			z.strictObject({ series: nameSchema, sign, plausible: z.tuple([finite, finite]), rationale: words })
		)
		.max(12),
	constant: z.boolean(),
	trend: z.boolean()
});

const shortRun = z.strictObject({
	own: lags(1),
	drivers: z.array(z.strictObject({ series: nameSchema, lags: lags(0), sign })).max(24),
	constant: z.boolean()
});

const dummy = z.strictObject({
	name: nameSchema,
	kind: z.enum(['pulse', 'step', 'seasonal']),
	/** Absent only for seasonal dummies over the whole sample. */
	from: period.optional(),
	/** Absent: the pulse of one period, the step to the end of the sample. */
	to: period.optional(),
	in: z.enum(['short', 'long', 'both']),
	reason: words
});

const estimator = z.strictObject({
	kind: z.enum(['two-step', 'one-step', 'dols', 'fm', 'imposed', 'elsewhere']),
	leads: z.int().min(0).max(8).optional(),
	imposed: z
		.strictObject({
			constant: finite,
			trend: finite.optional(),
			slopes: z.array(z.strictObject({ series: nameSchema, value: finite })).max(12)
		})
		.optional()
});

const claimed = z.strictObject({
	source: words,
	coefficients: z
		.array(z.strictObject({ term: z.string().max(100), value: decimal, se: decimal.optional() }))
		.max(200),
	covariance: z
		.strictObject({ terms: z.array(z.string().max(100)).max(100), rows: z.array(z.array(finite)) })
		.optional(),
	residuals: z.strictObject({ from: period, values: z.array(finite).max(5000) }).optional()
});

/**
 * The specification of an error-correction model, term by term; immutable once submitted. Strings of `claimed`
 * keep the digits as typed. `structuralIssues` says what the shape alone cannot.
 */
export const specificationSchema = z.strictObject({
	schema: z.literal(1),
	frequency: z.enum(frequencies),
	series: z.array(seriesSchema).min(1).max(25),
	dependent: nameSchema,
	longRun,
	shortRun,
	dummies: z.array(dummy).max(40),
	fixed: z.array(z.strictObject({ term: z.string().max(100), value: finite, reason: words })).max(40),
	sample: z.strictObject({ from: period, to: period }),
	estimator,
	standardErrors: z.enum(['ols', 'hc3', 'hac']),
	claimed: claimed.optional()
});

export type Specification = z.infer<typeof specificationSchema>;
export type SeriesSpecification = z.infer<typeof seriesSchema>;
export type EstimatorKind = Specification['estimator']['kind'];
export type Sign = (typeof signs)[number];
