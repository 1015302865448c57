import type { Note } from '$lib/domain/lineage';
import { uploadIssue, type UploadIssue } from '$lib/domain/lineage-codes';
import { periodText, type Frequency } from '$lib/domain/period';
import { existingDay, readPeriod, type PeriodReading } from './period-text';
import { reject, Rejected, shown } from './rejected';

export interface PeriodCell {
	readonly row: number;
	readonly text: string;
}

export interface Periods {
	readonly frequency: Frequency;
	/** Sorted and distinct. */
	readonly periods: readonly string[];
	/** Place in the file's rows of each sorted period. */
	readonly order: readonly number[];
	readonly notes: readonly Note[];
}

/** One row's period as months since year 0; `day` where it was a date. */
interface Placed {
	readonly row: number;
	readonly text: string;
	readonly month: number;
	readonly day?: number;
	readonly lastDay?: boolean;
}

type Sound = Exclude<PeriodReading, { kind: 'fault' }>;
interface Read extends PeriodCell {
	readonly reading: Sound;
}

const listed = 10;

const readAll = (cells: readonly PeriodCell[]): Read[] => {
	const issues: UploadIssue[] = [];
	const read: Read[] = [];
	for (const { row, text } of cells) {
		const reading = readPeriod(text);
		if (reading.kind !== 'fault') read.push({ row, text, reading });
		else if (issues.length < listed) issues.push(uploadIssue(reading.code, [row, shown(text)], { row }));
	}
	if (issues.length > 0) throw new Rejected(issues);
	return read;
};

const labels: Readonly<Partial<Record<PeriodReading['kind'], string>>> = {
	year: 'Annual',
	quarter: 'Quarterly',
	month: 'Monthly'
};

const oneForm = (read: readonly Read[]): void => {
	const first = read[0]!;
	const form = ({ reading }: Read): string =>
		reading.kind === 'two-ways' ? `two-ways ${reading.separator}` : reading.kind;
	const other = read.find((cell) => form(cell) !== form(first));
	if (!other) return;
	const before = labels[first.reading.kind];
	const then = labels[other.reading.kind];
	if (before && then)
		reject('mixed-frequency', [before, other.row - 1, then.toLowerCase()], { row: other.row });
	reject('mixed-dates', [other.row, shown(other.text), shown(first.text)], { row: other.row });
};

const monthNames = new Intl.DateTimeFormat('en', { month: 'long', timeZone: 'UTC' });
const dayWords = (year: number, month: number, day: number): string =>
	existingDay(year, month, day)
		? `${day} ${monthNames.format(new Date(Date.UTC(2000, month - 1, 1)))} ${year}`
		: 'no date';

type DateOrder = 'dmy' | 'mdy';

const askOrder = (read: readonly Read[]): never => {
	const days = read.flatMap(({ row, text, reading }) =>
		reading.kind === 'two-ways' ? [{ row, text, reading }] : []
	);
	const dmy = days.some(({ reading }) => reading.a > 12);
	const mdy = days.some(({ reading }) => reading.b > 12);
	const { row, text, reading } = days.find(({ reading: r }) => r.a !== r.b) ?? days[0]!;
	const one = dayWords(reading.year, reading.b, reading.a);
	const other = dayWords(reading.year, reading.a, reading.b);
	return reject('ambiguous-date', [shown(text), one, other], { row }, [
		{
			choice: 'dateOrder',
			options: [
				{ value: 'dmy', label: `Day first: ${text.trim()} is ${one}` },
				{ value: 'mdy', label: `Month first: ${text.trim()} is ${other}` }
			],
			...(dmy === mdy ? {} : { proposal: dmy ? 'dmy' : 'mdy' })
		}
	]);
};

const placeDay = (cell: PeriodCell, year: number, month: number, day: number): Placed => ({
	row: cell.row,
	text: cell.text,
	month: year * 12 + month - 1,
	day,
	lastDay: !existingDay(year, month, day + 1)
});

const place = (cell: Read, partMonths: 1 | 3, order: DateOrder | undefined): Placed => {
	const { reading, row, text } = cell;
	switch (reading.kind) {
		case 'year':
			return { row, text, month: reading.year * 12 };
		case 'quarter':
			return { row, text, month: reading.year * 12 + (reading.within - 1) * 3 };
		case 'month':
			return { row, text, month: reading.year * 12 + reading.within - 1 };
		case 'part':
			return { row, text, month: reading.year * 12 + (reading.within - 1) * partMonths };
		case 'date':
			return placeDay(cell, reading.year, reading.month, reading.day);
		case 'two-ways': {
			const [day, month] = order === 'mdy' ? [reading.b, reading.a] : [reading.a, reading.b];
			if (!existingDay(reading.year, month, day)) reject('date', [row, shown(text)], { row });
			return placeDay(cell, reading.year, month, day);
		}
	}
};

/** Months between neighbours that a frequency may have: its own step, or several of it where periods are missing. */
const stepName = (months: number): string =>
	months === 12 ? 'annual' : months === 3 ? 'quarterly' : 'monthly';

const twice = (sorted: readonly Placed[], text: (cell: Placed) => string): void => {
	const issues: UploadIssue[] = [];
	for (let i = 1; i < sorted.length && issues.length < listed; i++) {
		const a = sorted[i - 1]!;
		const b = sorted[i]!;
		if (a.month === b.month)
			issues.push(
				uploadIssue('period-twice', [text(a), Math.min(a.row, b.row), Math.max(a.row, b.row)], {
					row: Math.max(a.row, b.row)
				})
			);
	}
	if (issues.length > 0) throw new Rejected(issues);
};

const severalDatesAMonth = (sorted: readonly Placed[]): void => {
	if (sorted[0]?.day === undefined) return;
	const months = new Set(sorted.map(({ month }) => month)).size;
	const days = new Set(sorted.map(({ month, day }) => `${month} ${day}`)).size;
	// One day twice is a repeated period; many days a month are daily or weekly figures.
	if (days > 1.5 * months) reject('not-a-frequency', ['days or weeks'], { row: sorted[1]?.row ?? 1 });
};

/** Step in months: 12, 3 or 1, the largest that fits all distances; refuses a file that changes its step. */
const stepOf = (sorted: readonly Placed[], least: 1 | 3 | 12): 1 | 3 | 12 => {
	const gaps = sorted.slice(1).map((cell, i) => cell.month - sorted[i]!.month);
	const step =
		([12, 3, 1] as const).find((months) => months >= least && gaps.every((gap) => gap % months === 0)) ?? 1;
	if (gaps.length > 1 && gaps.every((gap) => gap === gaps[0]) && gaps[0] !== step && gaps[0]! < 12)
		reject('not-a-frequency', [`${gaps[0]} months`], { row: sorted[1]!.row });
	// Two equal longer steps in a row, beside steps of the shorter kind, are another frequency and not a gap.
	const longer = ([12, 3] as const).filter((months) => months > step);
	const own = gaps.filter((gap) => gap === step).length;
	for (let i = 1; i < gaps.length; i++) {
		const coarse = longer.find((months) => gaps[i] === months && gaps[i - 1] === months);
		if (coarse === undefined || own < 2) continue;
		const startsCoarse = i === 1;
		const change = startsCoarse ? gaps.findIndex((gap) => gap !== coarse) : i - 1;
		const [first, then] = startsCoarse ? [coarse, step] : [step, coarse];
		const until = sorted[change]!.row;
		const words = stepName(first);
		reject('mixed-frequency', [words[0]!.toUpperCase() + words.slice(1), until, stepName(then)], {
			row: until + 1
		});
	}
	return step;
};

const frequencyOfStep = { 12: 'annual', 3: 'quarterly', 1: 'monthly' } as const;

const labelNotes = (sorted: readonly Placed[], step: 1 | 3 | 12): Note[] => {
	const days = sorted.filter(({ day }) => day !== undefined);
	const start = days.filter(({ month, day }) => day === 1 && month % step === 0).length;
	const end = days.filter(({ month, lastDay }) => lastDay && month % step === step - 1).length;
	return start > 0 && end > 0
		? [
				{
					code: 'labels-mixed',
					message: `${start} periods are labelled by their first day, ${end} by their last.`
				}
			]
		: [];
};

const leastStep = (kind: Sound['kind'], partMonths: 1 | 3): 1 | 3 | 12 => {
	if (kind === 'year') return 12;
	if (kind === 'quarter') return 3;
	return kind === 'part' ? partMonths : 1;
};

/**
 * Reads the column of periods: one form, one frequency (the largest step that fits all distances), each period once.
 * Rows may stand in any order; gaps are allowed and found by the integrity check.
 * @throws Rejected with a code of the closed list.
 */
export const readPeriods = (cells: readonly PeriodCell[], dateOrder?: DateOrder): Periods => {
	const read = readAll(cells);
	oneForm(read);
	const kind = read[0]!.reading.kind;
	if (kind === 'two-ways' && !dateOrder) askOrder(read);
	const partMonths = read.some(({ reading }) => reading.kind === 'part' && reading.within > 4) ? 1 : 3;
	const placed = read.map((cell) => place(cell, partMonths, dateOrder));
	const order = placed.map((_, i) => i).sort((a, b) => placed[a]!.month - placed[b]!.month || a - b);
	const sorted = order.map((i) => placed[i]!);
	severalDatesAMonth(sorted);
	const distinct = sorted.filter((cell, i) => cell.month !== sorted[i - 1]?.month);
	const step =
		distinct.length > 1 ? stepOf(distinct, leastStep(kind, partMonths)) : leastStep(kind, partMonths);
	const frequency = frequencyOfStep[step];
	const text = (cell: Placed): string => periodText(Math.floor(cell.month / step), frequency);
	twice(sorted, text);
	const notes = labelNotes(sorted, step);
	if (order.some((place, i) => place !== i))
		notes.unshift({ code: 'sorted', message: 'Rows were put in order of time.' });
	return { frequency, periods: sorted.map(text), order, notes };
};
