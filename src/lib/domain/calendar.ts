/** A calendar date without a time, `YYYY-MM-DD`. */
export type CalendarDate = string;

const form = /^(\d{4})-(\d{2})-(\d{2})$/;
const dayLength = 86_400_000;

const pad = (value: number, digits: number): string => String(value).padStart(digits, '0');

const written = (year: number, month: number, day: number): CalendarDate =>
	`${pad(year, 4)}-${pad(month, 2)}-${pad(day, 2)}`;

const daysInMonth = (year: number, month: number): number => new Date(Date.UTC(year, month, 0)).getUTCDate();

/** True for a date that exists: `2024-02-29` does, `2023-02-29` does not. */
export const isCalendarDate = (text: string): boolean => {
	const found = form.exec(text);
	if (!found) return false;
	const [year, month, day] = found.slice(1).map(Number) as [number, number, number];
	return month >= 1 && month <= 12 && day >= 1 && day <= daysInMonth(year, month);
};

const parts = (date: CalendarDate): [number, number, number] => {
	if (!isCalendarDate(date)) throw new RangeError(`${date} is not a calendar date`);
	return date.split('-').map(Number) as [number, number, number];
};

const dayNumber = (date: CalendarDate): number => {
	const [year, month, day] = parts(date);
	return Date.UTC(year, month - 1, day) / dayLength;
};

/** Making a formatter costs a thousand times its use. */
const formatters = new Map<string, Intl.DateTimeFormat>();

const formatterOf = (zone: string): Intl.DateTimeFormat => {
	let formatter = formatters.get(zone);
	if (!formatter) {
		formatter = new Intl.DateTimeFormat('en-US', {
			timeZone: zone,
			calendar: 'gregory',
			numberingSystem: 'latn',
			year: 'numeric',
			month: '2-digit',
			day: '2-digit'
		});
		formatters.set(zone, formatter);
	}
	return formatter;
};

/**
 * The calendar date of an instant in an IANA zone: a decision signed at 23:30 UTC belongs to the next day in Helsinki.
 *
 * @param instant a moment, or its ISO text
 */
export const dateIn = (zone: string, instant: Date | string): CalendarDate => {
	const shown = formatterOf(zone).formatToParts(typeof instant === 'string' ? new Date(instant) : instant);
	const of = (type: string): number => Number(shown.find((part) => part.type === type)!.value);
	return written(of('year'), of('month'), of('day'));
};

/**
 * Moves a date by whole months. Where the day does not exist in the month reached, its last day stands in:
 * 29 February and twelve months give 28 February, and forty-eight months give 29 February again.
 */
export const addMonths = (date: CalendarDate, months: number): CalendarDate => {
	const [year, month, day] = parts(date);
	const count = year * 12 + (month - 1) + months;
	const [toYear, toMonth] = [Math.floor(count / 12), (count % 12) + 1];
	return written(toYear, toMonth, Math.min(day, daysInMonth(toYear, toMonth)));
};

/** Days from one date to another; negative when the second lies before. */
export const daysBetween = (from: CalendarDate, to: CalendarDate): number => dayNumber(to) - dayNumber(from);
