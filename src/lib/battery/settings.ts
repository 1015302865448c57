import { Invalid } from '$lib/domain/faults';
import { policyLine, type Policy, type PolicyLine } from '$lib/domain/policy';
import type { Override } from '$lib/domain/run';

/** The policy with the overrides of one run: what the checks read. */
export interface Settings {
	readonly number: (path: string) => number;
	readonly text: (path: string) => string;
	readonly numbers: (path: string) => readonly number[];
	readonly texts: (path: string) => readonly string[];
}

type Value = PolicyLine['value'];

const shape = (value: Value): string => (Array.isArray(value) ? `list of ${typeof value[0]}` : typeof value);

/** Overrides that name no line, a line that may not be overridden, or a value of another kind. */
const overrideIssues = (policy: Policy, overrides: readonly Override[]) =>
	overrides.flatMap(({ setting, value }, index) => {
		const line = policyLine(policy, setting);
		const pointer = `/settings/${index}`;
		if (!line) return [{ pointer: `${pointer}/setting`, message: `The policy has no line ${setting}.` }];
		if (!line.overridable)
			return [{ pointer: `${pointer}/setting`, message: `The policy does not let a run change ${setting}.` }];
		return shape(line.value) === shape(value)
			? []
			: [{ pointer: `${pointer}/value`, message: `${setting} needs a ${shape(line.value)}.` }];
	});

/**
 * Reads policy lines, overridden ones first.
 *
 * @throws Invalid for an override that the policy does not allow
 */
export const settingsOf = (policy: Policy, overrides: readonly Override[]): Settings => {
	const issues = overrideIssues(policy, overrides);
	if (issues.length > 0) throw new Invalid(issues);
	const replaced = new Map(overrides.map(({ setting, value }) => [setting, value]));
	const value = (path: string): Value => {
		const found = replaced.get(path) ?? policyLine(policy, path)?.value;
		if (found === undefined)
			throw new Invalid([{ pointer: '', message: `The policy lacks the line ${path}.` }]);
		return found;
	};
	const of = <T extends Value>(path: string, kind: string): T => {
		const found = value(path);
		if (shape(found) !== kind)
			throw new Invalid([{ pointer: '', message: `The policy line ${path} must be a ${kind}.` }]);
		return found as T;
	};
	return Object.freeze({
		number: (path: string) => of<number>(path, 'number'),
		text: (path: string) => of<string>(path, 'string'),
		numbers: (path: string) => of<number[]>(path, 'list of number'),
		texts: (path: string) => of<string[]>(path, 'list of string')
	});
};
