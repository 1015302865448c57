import type { Frequency } from '$lib/domain/period';
import type { Companion, Estimates, Group } from '$lib/domain/run-result';
import { percent, significant } from './figures';
import { checkTitle } from './sentences';
import { reasonWords } from './words';

const periodWords: Readonly<Record<Frequency, readonly [one: string, many: string]>> = {
	annual: ['year', 'years'],
	quarterly: ['quarter', 'quarters'],
	monthly: ['month', 'months']
};

/** What the speed means: how much of a gap closes in a period, and when half of it is gone. */
export const speedSentence = ({ speed, halfLife }: Estimates, frequency: Frequency): string => {
	const [one, many] = periodWords[frequency];
	const lambda = speed.value;
	const start = `The coefficient on the equilibrium error (gap) is ${significant(-lambda)}`;
	if (lambda <= 0) return `${start}: a gap does not close.`;
	if (lambda >= 1) return `${start}: a gap overshoots within a ${one}.`;
	const half =
		halfLife.value === null ? '' : `; half of a shock is gone after ${significant(halfLife.value)} ${many}`;
	return `${start}: ${percent(lambda)} of a gap closes in a ${one}${half}.`;
};

/** What a cheaper model says, with the plain warning where its fit means nothing. */
export const companionSentence = (companion: Companion): string => {
	const { kind, estimates, refused, warning } = companion;
	const name = kind === 'differences-only' ? 'Differences only' : 'Levels only';
	if (!estimates) return `${name}: not estimated, ${refused ? reasonWords[refused.reason] : 'no data'}.`;
	const { r2, sigma, n, durbinWatson } = estimates.fit;
	const fit = `${name}: R² = ${significant(r2)}, standard error of regression ${significant(sigma)}, n = ${n}.`;
	if (warning === 'spurious-levels')
		return `${fit} The levels wander together without cointegrating: this fit is no evidence of a relation (Durbin-Watson ${significant(durbinWatson)}).`;
	if (warning === 'not-established')
		return `${fit} Whether the levels cointegrate could not be tested, so this fit is no evidence of a relation.`;
	return fit;
};

/** Why a group has its verdict. */
export const groupSentence = ({ verdict, primary, loweredBy, reason }: Group): string => {
	const decides = checkTitle(primary);
	if (verdict === 'not assessable')
		return `${decides} is not assessable${reason ? `: ${reasonWords[reason]}` : ''}.`;
	if (loweredBy.length > 0)
		return `${decides} holds; lowered to query by ${loweredBy.map(checkTitle).join(', ')}.`;
	return `Decided by: ${decides}.`;
};
