import { replicate } from '$lib/econometrics/error-correction/replication';
import { isRefusal } from '$lib/econometrics/refusal';
import type { Estimates, ReplicationRow, TermEstimate } from '$lib/domain/run-result';
import type { Specification } from '$lib/domain/specification';
import { termsOf } from '$lib/domain/specification-terms';

/** Differences a claimed figure may have: beyond its digits on the same data, and by other software. */
export interface ReplicationTolerance {
	readonly sameData: number;
	readonly otherSoftware: number;
}

export type ReplicationGrade = 'digits' | 'other-software' | 'neither';

/** Our figure for a claimed term. */
const oursOf = (estimates: Estimates, code: string): Pick<TermEstimate, 'value' | 'se'> | undefined => {
	// The coefficient on the gap is minus the speed, in the one-step form too.
	if (code === 'ec.l1') return { value: -estimates.speed.value, se: estimates.speed.se };
	return [...estimates.longRun, ...estimates.equation.terms].find(({ term }) => term.code === code);
};

/** How far a difference is allowed, and which allowance it meets. */
export const gradeOf = (
	claimed: string,
	ours: number,
	{ sameData, otherSoftware }: ReplicationTolerance
):
	| { grade: ReplicationGrade; difference: number; decimals: number; value: number; allowed: number }
	| undefined => {
	const found = replicate(claimed, ours, { absolute: 0, relative: otherSoftware });
	if (isRefusal(found)) return undefined;
	const allowed = found.rounding + sameData * Math.abs(found.claimed);
	const within = Math.abs(found.difference) <= allowed || found.within === 'rounding';
	return {
		grade: within ? 'digits' : found.within === 'tolerance' ? 'other-software' : 'neither',
		difference: found.difference,
		decimals: found.decimals,
		value: found.claimed,
		allowed
	};
};

/** Claimed figures beside ours; nothing is compared where nothing was estimated here. */
export const replicationRows = (
	spec: Specification,
	estimates: Estimates | null,
	tolerance: ReplicationTolerance
): readonly ReplicationRow[] => {
	if (spec.estimator.kind === 'elsewhere') return [];
	const terms = termsOf(spec);
	return (spec.claimed?.coefficients ?? []).flatMap(({ term: code, value, se }): ReplicationRow[] => {
		const term = terms.find((each) => each.code === code);
		const ours = estimates ? oursOf(estimates, code) : undefined;
		const graded = gradeOf(value, ours?.value ?? 0, tolerance);
		if (!term || !graded) return [];
		return [
			Object.freeze({
				term,
				claimed: value,
				value: graded.value,
				decimals: graded.decimals,
				...(se !== undefined && { claimedSe: se }),
				ours: ours?.value ?? null,
				oursSe: ours?.se ?? null,
				difference: ours ? graded.difference : null,
				tolerance: graded.allowed,
				replicates: ours ? graded.grade === 'digits' : null
			})
		];
	});
};
