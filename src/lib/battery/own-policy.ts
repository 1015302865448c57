import { Invalid, type Issue } from '$lib/domain/faults';
import { policyLines, policySchema, type Policy, type PolicyLine } from '$lib/domain/policy';

/** A bank's word on one line of a release: why it keeps the value, or which other value it takes and why. */
export interface OwnLine {
	readonly line: string;
	readonly value?: PolicyLine['value'];
	readonly reason: string;
}

const same = (a: unknown, b: unknown): boolean => JSON.stringify(a) === JSON.stringify(b);

const kind = (value: PolicyLine['value']): string =>
	Array.isArray(value) ? `a list of ${typeof value[0]}s` : `a ${typeof value}`;

/** Each line of the release needs a reason; a changed value is of the kind of the old one. */
const issuesOf = (release: Policy, own: ReadonlyMap<string, OwnLine>): Issue[] =>
	policyLines(release).flatMap(({ path, line }): Issue[] => {
		const word = own.get(path);
		if (!word || word.reason.trim() === '')
			return [
				{
					pointer: `/lines/${path.replaceAll('/', '~1')}/reason`,
					message: `Give your own reason for ${path}.`
				}
			];
		return word.value === undefined || kind(word.value) === kind(line.value)
			? []
			: [
					{
						pointer: `/lines/${path.replaceAll('/', '~1')}/value`,
						message: `${path} needs ${kind(line.value)}.`
					}
				];
	});

/** Puts a line's own value and reason into a copy of the policy, wherever the path leads. */
const withLine = (policy: Policy, path: string, line: PolicyLine): Policy => {
	const [section, first, second] = path.split('/');
	switch (section) {
		case 'levels':
			return { ...policy, levels: { ...policy.levels, [first!]: line } };
		case 'checks': {
			const check = policy.checks[first!]!;
			return {
				...policy,
				checks: { ...policy.checks, [first!]: { ...check, lines: { ...check.lines, [second!]: line } } }
			};
		}
		case 'tiers':
			return {
				...policy,
				tiers: policy.tiers.map((tier) => (String(tier.tier) === first ? { ...tier, [second!]: line } : tier))
			};
		case 'severities':
			return {
				...policy,
				severities: policy.severities.map((each) => (each.severity === first ? { ...each, due: line } : each))
			};
		default:
			return { ...policy, [section!]: line };
	}
};

/** What a bank adopts: the release with its own values and reasons, and which lines it changed. */
export interface OwnPolicy {
	readonly policy: Policy;
	readonly changed: readonly string[];
}

/**
 * A release as a bank adopts it.
 *
 * @throws Invalid naming each line without a reason, with a value of another kind, or that the release lacks
 */
export const ownPolicy = (release: Policy, words: readonly OwnLine[]): OwnPolicy => {
	const own = new Map(words.map((word) => [word.line, word]));
	const lines = policyLines(release);
	const known = new Set(lines.map(({ path }) => path));
	const issues = [
		...words
			.filter(({ line }) => !known.has(line))
			.map(({ line }) => ({ pointer: '/lines', message: `The release has no line ${line}.` })),
		...issuesOf(release, own)
	];
	if (issues.length > 0) throw new Invalid(issues);
	const changed = lines.flatMap(({ path, line }) => {
		const { value } = own.get(path)!;
		return value === undefined || same(value, line.value) ? [] : [path];
	});
	const policy = lines.reduce((made, { path, line }) => {
		const { value, reason } = own.get(path)!;
		return withLine(made, path, { ...line, value: value ?? line.value, reason });
	}, release);
	const parsed = policySchema.safeParse(policy);
	if (!parsed.success)
		throw new Invalid(
			parsed.error.issues.map(({ path, message }) => ({ pointer: `/${path.join('/')}`, message }))
		);
	return { policy: parsed.data, changed };
};
