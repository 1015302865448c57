import { isRefusal } from '$lib/econometrics/refusal';
import { linePath } from '$lib/domain/policy';
import type { Verdict } from '$lib/domain/run';
import type { Part } from '$lib/domain/run-result';
import { checkOf, notAssessable, refusedCheck, type AnyCheck, type Context } from '../context';
import { gradeOf, type ReplicationGrade } from '../replication';
import { sources } from '../sources';
import { worst } from '../verdict';

const id = 'replication.coefficients';

const verdictOf: Readonly<Record<ReplicationGrade, Verdict>> = {
	digits: 'holds',
	'other-software': 'query',
	neither: 'fails'
};

/** The two tolerances of the policy. */
export const replicationTolerance = ({ settings }: Pick<Context, 'settings'>) => ({
	sameData: settings.number(linePath(id, 'same-data')),
	otherSoftware: settings.number(linePath(id, 'other-software'))
});

const partsOf = (context: Context): Part[] => {
	const tolerance = replicationTolerance(context);
	return context.replication.flatMap(({ term, claimed, ours, difference }): Part[] => {
		if (ours === null || difference === null) return [];
		const graded = gradeOf(claimed, ours, tolerance);
		if (!graded) return [];
		return [
			Object.freeze({
				about: term.code,
				statistic: { name: 'difference', value: difference },
				parameters: { claimed, ours, allowed: graded.allowed },
				verdict: verdictOf[graded.grade]
			})
		];
	});
};

/** Every claimed coefficient against the one estimated from the stored data, with the digits as typed. */
export const replicationCoefficients: AnyCheck = (context) => {
	const rest = { source: sources[id]!, lines: ['same-data', 'other-software'] };
	if (isRefusal(context.model)) return refusedCheck(id, context.model, rest);
	if (context.spec.estimator.kind === 'elsewhere')
		return notAssessable(
			id,
			'given',
			'The coefficients were given; nothing was estimated to compare with.',
			rest
		);
	const parts = partsOf(context);
	if (parts.length === 0)
		return notAssessable(id, 'not-observable', 'No coefficients were claimed for this version.', rest);
	const apart = parts.filter(({ verdict }) => verdict !== 'holds').length;
	return checkOf(id, {
		...rest,
		verdict: worst(parts.map(({ verdict }) => verdict!)),
		parameters: { claimed: parts.length, apart },
		parts
	});
};
