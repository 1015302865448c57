import { refuse, type Refusal } from '../refusal';

export type Frequency = 'annual' | 'quarterly' | 'monthly';

/** Consecutive periods of one frequency. */
export interface Timeline {
	readonly frequency: Frequency;
	/** Periods per year: 1, 4 or 12. */
	readonly perYear: number;
	/** Number of the first period, counted from the first period of year 0. */
	readonly first: number;
	readonly length: number;
}

const SHAPES: readonly [Frequency, number, RegExp][] = [
	['annual', 1, /^(\d{4})$/],
	['quarterly', 4, /^(\d{4})-?Q([1-4])$/],
	['monthly', 12, /^(\d{4})-(0[1-9]|1[0-2])$/]
];

/** A period as a number within its frequency; undefined for a text that is none (`1974`, `1974-Q1`, `1974-03`). */
export function parsePeriod(text: string): { frequency: Frequency; number: number } | undefined {
	for (const [frequency, perYear, shape] of SHAPES) {
		const parts = shape.exec(text);
		if (parts) return { frequency, number: Number(parts[1]) * perYear + Number(parts[2] ?? 1) - 1 };
	}
	return undefined;
}

/** The period that comes `offset` places after the first one of a timeline, as people write it. */
export function periodAt(
	timeline: Pick<Timeline, 'frequency' | 'perYear' | 'first'>,
	offset: number
): string {
	const number = timeline.first + offset;
	const year = String(Math.floor(number / timeline.perYear)).padStart(4, '0');
	const within = (number % timeline.perYear) + 1;
	if (timeline.frequency === 'annual') return year;
	return timeline.frequency === 'quarterly'
		? `${year}-Q${within}`
		: `${year}-${String(within).padStart(2, '0')}`;
}

/** Place of a period within its year, 1..f. */
export const periodOfYear = (timeline: Timeline, offset: number): number =>
	((timeline.first + offset) % timeline.perYear) + 1;

/** Place of a period in a timeline (0 = its first one; may lie outside); undefined for another frequency. */
export function offsetOf(timeline: Timeline, text: string): number | undefined {
	const period = parsePeriod(text);
	return period?.frequency === timeline.frequency ? period.number - timeline.first : undefined;
}

/**
 * The timeline of the periods of a data set, in their order. Nothing is sorted or filled. Refuses `too-short`
 * (none), `frequency` (unreadable or mixed), `duplicate` and `gap` (a period missing, or out of order).
 */
export function timelineOf(periods: readonly string[]): Timeline | Refusal {
	const head = periods[0];
	if (head === undefined) return refuse('too-short', 'There are no periods.');
	const start = parsePeriod(head);
	if (!start) return refuse('frequency', `${head} is not a year, quarter or month.`);
	for (const [i, text] of periods.entries()) {
		const period = parsePeriod(text);
		if (period?.frequency !== start.frequency)
			return refuse('frequency', `${text} is not a period of the same frequency as ${head}.`);
		const expected = start.number + i;
		if (period.number === expected - 1 && i > 0) return refuse('duplicate', `${text} appears twice.`);
		if (period.number !== expected)
			return refuse('gap', `${text} does not follow ${periods[i - 1]}; periods must be consecutive.`);
	}
	const perYear = SHAPES.find(([frequency]) => frequency === start.frequency)![1];
	return Object.freeze({ frequency: start.frequency, perYear, first: start.number, length: periods.length });
}
