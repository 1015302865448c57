import type { OwnLine } from '$lib/battery/own-policy';
import { Invalid, type Issue } from '$lib/domain/faults';
import { policyLines, type Policy } from '$lib/domain/policy';
import { valueFrom } from '../line-text';

/** Names of the two fields of the n-th line of a release. */
export const fieldNames = (n: number): { value: string; reason: string } => ({
	value: `value${n}`,
	reason: `reason${n}`
});

/** What was typed for each line, in the order of the release. */
export interface TypedLine {
	readonly value: string;
	readonly reason: string;
}

const sent = (data: FormData, name: string): string => {
	const value = data.get(name);
	return typeof value === 'string' ? value : '';
};

export const typedLines = (release: Policy, data: FormData): readonly TypedLine[] =>
	policyLines(release).map((_, n) => {
		const { value, reason } = fieldNames(n);
		return { value: sent(data, value), reason: sent(data, reason) };
	});

/**
 * The bank's word on each line.
 *
 * @throws Invalid naming the field of each line without a reason or with a value that cannot be read
 */
export const ownLines = (release: Policy, typed: readonly TypedLine[]): readonly OwnLine[] => {
	const issues: Issue[] = [];
	const lines = policyLines(release).map(({ path, line }, n): OwnLine => {
		const { value, reason } = typed[n] ?? { value: '', reason: '' };
		const names = fieldNames(n);
		if (reason.trim() === '')
			issues.push({ pointer: `/${names.reason}`, message: `Give your own reason for ${path}.` });
		if (reason.length > 500)
			issues.push({ pointer: `/${names.reason}`, message: `${path}: a reason has at most 500 characters.` });
		try {
			return { line: path, value: valueFrom(value, line.value, `/${names.value}`), reason: reason.trim() };
		} catch (error) {
			if (!(error instanceof Invalid)) throw error;
			issues.push(...error.issues);
			return { line: path, reason };
		}
	});
	if (issues.length > 0) throw new Invalid(issues);
	return lines;
};
