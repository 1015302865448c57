/** Lines of the policy a run was judged by, as the report cites them. */
import type { PolicyLine } from '$lib/domain/policy';
import { MINUS } from '../format';
import { figure } from './figures';

export interface PolicyLineView {
	readonly value: string;
	readonly says: string;
	/** Its place on the page of that policy. */
	readonly href: string;
}

/** The page of the policy a run was judged by, whichever is in force now. */
export const policyHref = (digest: string): string => `/policy?policy=${digest}`;

/** `levels/query` is `level query`, `checks/stability.sup-f/trim` is `trim`: the check is known where it stands. */
export function lineName(path: string): string {
	const [section, ...rest] = path.split('/');
	const name = (rest.at(-1) ?? path).replaceAll('-', ' ');
	return section === 'levels' ? `level ${name}` : name;
}

const one = (value: number | string): string =>
	typeof value === 'string'
		? value
		: Number.isInteger(value)
			? figure(value, 0)
			: String(value).replace('-', MINUS);

/** The value of a policy line: thresholds are written with the digits they have. */
export function valueWords(value: PolicyLine['value']): string {
	if (typeof value === 'boolean') return value ? 'yes' : 'no';
	return (Array.isArray(value) ? value : [value]).map((each: number | string) => one(each)).join(', ');
}

/** A line with its path, which is its id on the page of the policy of that digest. */
export const policyLineView = (
	{ value, unit, says }: PolicyLine,
	path: string,
	digest: string
): PolicyLineView => ({
	value: unit === undefined ? valueWords(value) : `${valueWords(value)} ${unit}`,
	says,
	href: `${policyHref(digest)}#${path}`
});
