import { z } from 'zod';

const words = z.string().trim().min(1);

/** Source of a line for which no publication is known. */
export const noSource = 'common practice, no source';

/** One line of a policy: a value, why it is that, and where it comes from. */
export const lineSchema = z.strictObject({
	value: z.union([z.number(), z.string(), z.boolean(), z.array(z.number()), z.array(z.string())]),
	unit: words.optional(),
	/** What the line says, for readers of the policy page. */
	says: words,
	reason: words,
	/** A publication, or `common practice, no source`. */
	source: words,
	/** A run may replace the value with a reason of its own. */
	overridable: z.boolean().optional()
});
export type PolicyLine = z.infer<typeof lineSchema>;

const lines = z.record(z.string(), lineSchema);

const question = z.strictObject({
	id: z.enum(['materiality', 'complexity']),
	asks: words,
	answers: z.array(z.strictObject({ score: z.int().min(1), label: words, says: words })).min(2),
	reason: words,
	source: words
});

const tier = z.strictObject({
	tier: z.int().min(1),
	title: words,
	/** Product of the two scores from which the tier applies. */
	from: lineSchema,
	review: lineSchema,
	revalidation: lineSchema,
	/** Check ids run for a model of this tier. */
	battery: z.array(words).min(1),
	batteryReason: words
});

const group = z.strictObject({
	group: words,
	title: words,
	/** The primary check by kind of estimator; `any` for all others. Absent: the group is shown, not judged. */
	primary: z.record(z.string(), words).optional(),
	reason: words,
	source: words
});

const severity = z.strictObject({
	severity: z.enum(['high', 'medium', 'low']),
	criteria: words,
	due: lineSchema
});

/** A released policy file: every threshold the register judges by. */
export const policySchema = z.strictObject({
	schema: z.literal(1),
	release: z.string().regex(/^\d{4}-\d{2}-\d{2}$/),
	title: words,
	about: words,
	questions: z.array(question).length(2),
	tiers: z.array(tier).min(1),
	groups: z.array(group).min(1),
	/** Lines that hold for all checks: levels, multipliers, seeds. */
	levels: lines,
	checks: z.record(z.string(), z.strictObject({ title: words, lines })),
	severities: z.array(severity).length(3),
	reminders: lineSchema,
	lookBack: lineSchema,
	quorum: lineSchema
});
export type Policy = z.infer<typeof policySchema>;
export type PolicyTier = Policy['tiers'][number];

/** Path of a line in the policy, as `thresholdFrom` cites it: `checks/residual.autocorrelation/least`. */
export const linePath = (check: string, name: string): string => `checks/${check}/${name}`;
export const levelPath = (name: string): string => `levels/${name}`;

/** One line with its place in the policy. */
export interface PlacedLine {
	readonly path: string;
	readonly line: PolicyLine;
}

const placed = (prefix: string, record: Readonly<Record<string, PolicyLine>>): PlacedLine[] =>
	Object.entries(record).map(([name, line]) => ({ path: `${prefix}/${name}`, line }));

/** Every line of a policy that holds a value, in the order of the file. */
export const policyLines = (policy: Policy): readonly PlacedLine[] => [
	...policy.tiers.flatMap(({ tier, from, review, revalidation }) =>
		placed(`tiers/${tier}`, { from, review, revalidation })
	),
	...placed('levels', policy.levels),
	...Object.entries(policy.checks).flatMap(([check, { lines }]) => placed(`checks/${check}`, lines)),
	...policy.severities.map(({ severity, due }) => ({ path: `severities/${severity}/due`, line: due })),
	{ path: 'reminders', line: policy.reminders },
	{ path: 'lookBack', line: policy.lookBack },
	{ path: 'quorum', line: policy.quorum }
];

/** The line at a path; undefined where there is none. */
export const policyLine = (policy: Policy, path: string): PolicyLine | undefined =>
	policyLines(policy).find((each) => each.path === path)?.line;

/** The tier proposed for two scores: the strictest whose threshold their product reaches. */
export const proposedTier = (policy: Policy, materiality: number, complexity: number): PolicyTier => {
	const score = materiality * complexity;
	const ordered = [...policy.tiers].sort((a, b) => a.tier - b.tier);
	return ordered.find((each) => score >= Number(each.from.value)) ?? ordered[ordered.length - 1]!;
};

/** The tier of that number. */
export const policyTier = (policy: Policy, tier: number): PolicyTier | undefined =>
	policy.tiers.find((each) => each.tier === tier);
