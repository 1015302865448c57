import type { Check, Family } from '$lib/domain/run-result';
import type { Levels } from './verdict';

/** Holm's step-down p-values, in the order given (Holm 1979, Scandinavian J. Statistics 6, 65-70). */
export const holm = (p: readonly number[]): readonly number[] => {
	const order = p.map((_, i) => i).sort((a, b) => p[a]! - p[b]!);
	const corrected = new Array<number>(p.length);
	let floor = 0;
	order.forEach((at, rank) => {
		floor = Math.max(floor, Math.min(1, (p.length - rank) * p[at]!));
		corrected[at] = floor;
	});
	return corrected;
};

/** Checks that look at the same thing twice count once: the first of them stands for the others. */
const sameThing: readonly (readonly string[])[] = [
	['residual.autocorrelation', 'residual.portmanteau'],
	['stability.cusum', 'stability.cusumsq']
];

/** Checks in which a rejection is bad and a p-value or critical value judges: those that chance can make ring. */
const ringing = [
	'residual.autocorrelation',
	'residual.portmanteau',
	'residual.arch',
	'residual.heteroskedasticity',
	'residual.normality',
	'residual.functional-form',
	'stability.cusum',
	'stability.cusumsq',
	'stability.sup-f'
];

/**
 * False alarms to expect among the checks of a run: the sum of their levels, whatever their dependence; the chance of
 * at least one if they were independent. Correlated duplicates count once.
 */
export const familyOf = (checks: readonly Check[], { query }: Pick<Levels, 'query'>): Family => {
	const judged = ringing.flatMap((id) => {
		const check = checks.find((each) => each.id === id);
		return check && check.verdict !== 'not assessable' && check.verdict !== null ? [check] : [];
	});
	const ids = new Set(judged.map(({ id }) => id));
	const counted = judged.filter(({ id }) => {
		const twins = sameThing.find((pair) => pair.includes(id));
		return !twins || twins.find((twin) => ids.has(twin)) === id;
	});
	const withP = judged.filter(({ pValue }) => pValue !== undefined);
	const corrected = holm(withP.map(({ pValue }) => pValue!));
	return Object.freeze({
		judged: counted.length,
		alarms: counted.filter(({ verdict }) => verdict !== 'holds').length,
		expected: counted.length * query,
		atLeastOne: 1 - (1 - query) ** counted.length,
		members: judged.map((check) =>
			Object.freeze({
				check: check.id,
				level: query,
				p: check.pValue ?? null,
				holm: check.pValue === undefined ? null : corrected[withP.indexOf(check)]!
			})
		)
	});
};
