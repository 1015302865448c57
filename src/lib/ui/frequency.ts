export type Frequency = 'annual' | 'quarterly' | 'monthly';

/** The noun for one period of a frequency, and for several. */
export const PERIOD_NOUN: Readonly<Record<Frequency, readonly [one: string, many: string]>> = {
	annual: ['year', 'years'],
	quarterly: ['quarter', 'quarters'],
	monthly: ['month', 'months']
};
