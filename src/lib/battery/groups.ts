import type { Policy } from '$lib/domain/policy';
import type { Verdict } from '$lib/domain/run';
import type { Check, Group } from '$lib/domain/run-result';
import type { EstimatorKind } from '$lib/domain/specification';
import type { Context } from './context';

const primaryFor = (policy: Policy, group: string, kind: EstimatorKind): string | undefined => {
	const primary = policy.groups.find((each) => each.group === group)?.primary;
	return primary?.[kind] ?? primary?.['any'];
};

/** The check whose verdict is the group's, as the policy named it before the run. */
export const primaryOf = (context: Pick<Context, 'policy' | 'spec'>, group: string): string | undefined =>
	primaryFor(context.policy, group, context.spec.estimator.kind);

/**
 * The group's verdict is its primary check's. A corroborating check that does not hold can only lower *holds* to
 * *query*, and is named; a primary that is not assessable leaves the group so.
 */
export const groupsOf = (policy: Policy, kind: EstimatorKind, checks: readonly Check[]): readonly Group[] =>
	policy.groups.flatMap(({ group }): Group[] => {
		const id = primaryFor(policy, group, kind);
		const primary = checks.find((check) => check.id === id);
		if (id === undefined || primary?.verdict === undefined || primary.verdict === null) return [];
		const members = checks.filter((check) => check.group === group);
		const against = members.filter(
			(check) => check.id !== id && (check.verdict === 'query' || check.verdict === 'fails')
		);
		const lowered = primary.verdict === 'holds' && against.length > 0;
		const verdict: Verdict = lowered ? 'query' : primary.verdict;
		return [
			Object.freeze({
				group,
				verdict,
				...(primary.reason !== undefined && { reason: primary.reason }),
				primary: id,
				loweredBy: lowered ? against.map((check) => check.id) : [],
				checks: members.map((check) => check.id)
			})
		];
	});
