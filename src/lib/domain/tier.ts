import { addMonths, dateIn, daysBetween, type CalendarDate } from './calendar';
import { policyTier, proposedTier, type Policy } from './policy';

/** The score chosen for each question of the policy. */
export interface TierAnswer {
	readonly question: 'materiality' | 'complexity';
	readonly score: number;
}

/** The tier in force for a model, and how it came about. */
export interface TierInForce {
	readonly tier: number;
	readonly how: 'proposed' | 'confirmed' | 'overridden';
	/** The tier the answers give under the adopted policy, whatever was confirmed. */
	readonly proposed: number;
	readonly score: number;
}

const scoreOf = (answers: readonly TierAnswer[], question: TierAnswer['question']): number =>
	answers.find((answer) => answer.question === question)?.score ?? 1;

/** The tier the answers give: the strictest whose threshold the product of the scores reaches. */
export const tierOfAnswers = (
	policy: Policy,
	answers: readonly TierAnswer[]
): { tier: number; score: number } => {
	const [materiality, complexity] = [scoreOf(answers, 'materiality'), scoreOf(answers, 'complexity')];
	return { tier: proposedTier(policy, materiality, complexity).tier, score: materiality * complexity };
};

/** What stands for a model: its decided tier, or until someone decides the one proposed. */
export const tierInForce = (
	policy: Policy,
	answers: readonly TierAnswer[],
	decided: { readonly tier: number | null; readonly how: 'confirmed' | 'overridden' | null }
): TierInForce => {
	const { tier: proposed, score } = tierOfAnswers(policy, answers);
	return decided.tier === null || decided.how === null
		? { tier: proposed, how: 'proposed', proposed, score }
		: { tier: decided.tier, how: decided.how, proposed, score };
};

/** When a model must be reviewed next; computed, never stored. */
export interface ReviewDue {
	readonly date: CalendarDate;
	/** Days from today; negative when overdue. */
	readonly days: number;
	readonly overdue: boolean;
	/** `tier 1: 12 months from 2026-03-14`. */
	readonly reason: string;
}

/**
 * The next review: the last decision, or else the registration, plus the interval of the tier, as calendar dates of
 * the bank's zone. Undefined when the adopted policy does not know the tier.
 *
 * @param since instant of the last decision or of the registration
 */
export const reviewDue = (
	policy: Policy,
	zone: string,
	tier: number,
	since: string,
	now: Date
): ReviewDue | undefined => {
	const interval = policyTier(policy, tier)?.review.value;
	if (typeof interval !== 'number') return undefined;
	const from = dateIn(zone, since);
	const date = addMonths(from, interval);
	const days = daysBetween(dateIn(zone, now), date);
	return Object.freeze({
		date,
		days,
		overdue: days < 0,
		reason: `tier ${tier}: ${interval} ${interval === 1 ? 'month' : 'months'} from ${from}`
	});
};
