/** Where the coming twelve months and their due days lie on the year scale. */
import { daysBetween } from '$lib/domain/calendar';
import { countOf, formatDate } from './format';

export interface YearMark {
	readonly date: string;
	readonly label: string;
	readonly href: string;
	readonly overdue?: boolean | undefined;
}

const MONTHS = ['Jan', 'Feb', 'Mar', 'Apr', 'May', 'Jun', 'Jul', 'Aug', 'Sep', 'Oct', 'Nov', 'Dec'] as const;

export interface YearScaleView {
	/** Twelve months from that of today; `label` carries the year at the first and at January. */
	readonly months: readonly { readonly label: string; readonly dark: boolean; readonly left: number }[];
	/** Per cent of the width from the left edge. */
	readonly today: number;
	readonly ticks: readonly { readonly mark: YearMark; readonly left: number }[];
	readonly overdue: readonly YearMark[];
	/** The scale in words. */
	readonly text: string;
}

/** Position of a day on twelve months of equal width, in per cent. */
function position(first: { year: number; month: number }, date: string): number {
	const [year = 0, month = 1, day = 1] = date.slice(0, 10).split('-').map(Number);
	const whole = (year - first.year) * 12 + (month - 1 - first.month);
	const days = new Date(Date.UTC(year, month, 0)).getUTCDate();
	return ((whole + (day - 1) / days) / 12) * 100;
}

/** Lays out the scale for a reader's due days as of a day. */
export function yearScale(today: string, marks: readonly YearMark[]): YearScaleView {
	const [year = 0, month = 1] = today.split('-').map(Number);
	const first = { year, month: month - 1 };
	const months = Array.from({ length: 12 }, (_, i) => {
		const index = (first.month + i) % 12;
		const name = MONTHS[index] ?? '';
		const label =
			i === 0 || index === 0 ? `${name} ${first.year + Math.floor((first.month + i) / 12)}` : name;
		return { label, dark: i % 2 === 1, left: (i / 12) * 100 };
	});
	const late = (mark: YearMark): boolean => mark.overdue ?? daysBetween(today, formatDate(mark.date)) < 0;
	const overdue = marks.filter(late);
	const ticks = marks
		.filter((mark) => !late(mark))
		.map((mark) => ({ mark, left: position(first, mark.date) }))
		.filter(({ left }) => left <= 100)
		.sort((a, b) => a.left - b.left);
	const days = [...new Set(ticks.map(({ mark }) => mark.date))];
	const text = `The coming twelve months: ${countOf(overdue.length, 'date')} overdue; ${
		days.length > 0 ? `due ${days.join(', ')}` : 'nothing due'
	}`;
	return { months, today: position(first, today), ticks, overdue, text };
}
