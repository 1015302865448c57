import { addMonths } from '$lib/domain/calendar';
import type { Frequency } from '$lib/domain/period';
import type { Clock } from '../clock';

const day = 24 * 60 * 60_000;

/** The clock of the demo's making: it runs through the months before today and never back. */
export interface Stage {
	readonly today: Date;
	readonly now: Clock;
	/** Nine in the morning, so many months before today; later when the clock is past that. */
	readonly at: (months: number) => void;
	/** Lets days pass. */
	readonly pass: (days: number) => void;
}

/** A stage whose clock starts well before the first date asked for. */
export const stageOf = (today: Date): Stage => {
	const before = (months: number): Date =>
		new Date(`${addMonths(today.toISOString().slice(0, 10), -months)}T09:00:00.000Z`);
	let moment = before(15);
	return Object.freeze({
		today,
		now: () => moment,
		at: (months) => {
			const wanted = Math.min(before(months).getTime(), today.getTime());
			moment = new Date(Math.max(moment.getTime(), wanted));
		},
		pass: (days) => {
			moment = new Date(Math.min(moment.getTime() + days * day, today.getTime()));
		}
	} satisfies Stage);
};

/** Last period whose figures were out on a date: they appear some six weeks after its end. */
export const publishedBy = (at: Date, frequency: Frequency): string => {
	const known = new Date(at.getTime() - 45 * day);
	const year = known.getUTCFullYear();
	if (frequency === 'annual') return String(year - 1);
	const quarter = Math.floor(known.getUTCMonth() / 3);
	return quarter === 0 ? `${year - 1}-Q4` : `${year}-Q${quarter}`;
};
