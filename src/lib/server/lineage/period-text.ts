/** A period as a cell writes it, before the column tells its frequency. Months and quarters count from 1. */
export type PeriodReading =
	| { readonly kind: 'year'; readonly year: number }
	| { readonly kind: 'quarter'; readonly year: number; readonly within: number }
	| { readonly kind: 'month'; readonly year: number; readonly within: number }
	/** 1974:3, a quarter or a month. */
	| { readonly kind: 'part'; readonly year: number; readonly within: number }
	| { readonly kind: 'date'; readonly year: number; readonly month: number; readonly day: number }
	/** 03/04/2024: the order of day and month is the uploader's to say. */
	| {
			readonly kind: 'two-ways';
			readonly a: number;
			readonly b: number;
			readonly year: number;
			readonly separator: string;
	  }
	| { readonly kind: 'fault'; readonly code: 'date' | 'time' | 'looks-like-serials' };

const fault = (code: 'date' | 'time' | 'looks-like-serials' = 'date'): PeriodReading => ({
	kind: 'fault',
	code
});

const daysIn = (year: number, month: number): number => {
	// setUTCFullYear, because Date.UTC reads years 0 to 99 as 1900 to 1999.
	const date = new Date(0);
	date.setUTCFullYear(year, month, 0);
	return date.getUTCDate();
};

/** Whether the day exists in the calendar; year 0 does not. */
export const existingDay = (year: number, month: number, day: number): boolean =>
	year >= 1 && month >= 1 && month <= 12 && day >= 1 && day <= daysIn(year, month);

const within = (kind: 'quarter' | 'month', year: number, n: number): PeriodReading =>
	year >= 1 && n >= 1 && n <= (kind === 'quarter' ? 4 : 12) ? { kind, year, within: n } : fault();

const dated = (parts: RegExpExecArray): PeriodReading => {
	const [, year, month, day, hour, minute, second, zone] = parts;
	if (!existingDay(Number(year), Number(month), Number(day))) return fault();
	const midnight = [hour, minute, second].every((part) => part === undefined || Number(part) === 0);
	if (!midnight || (zone !== undefined && !/^(?:Z|[+-]00:?00)$/i.test(zone))) return fault('time');
	return { kind: 'date', year: Number(year), month: Number(month), day: Number(day) };
};

const twoWays = (parts: RegExpExecArray): PeriodReading => {
	const [, a, separator, b, year, rest] = parts;
	if (rest !== undefined && !/^[ T]?0?0:00(?::00(?:\.0+)?)?$/.test(rest)) return fault('time');
	const one = existingDay(Number(year), Number(b), Number(a));
	const other = existingDay(Number(year), Number(a), Number(b));
	return one || other
		? { kind: 'two-ways', a: Number(a), b: Number(b), year: Number(year), separator: separator! }
		: fault();
};

const forms: readonly (readonly [RegExp, (parts: RegExpExecArray) => PeriodReading])[] = [
	[/^(\d{4})(?:\.0)?$/, ([, year]) => (Number(year) >= 1 ? { kind: 'year', year: Number(year) } : fault())],
	[/^(\d{4})[- :]?Q(\d)$/i, ([, year, n]) => within('quarter', Number(year), Number(n))],
	[/^Q(\d)[- :/]?(\d{4})$/i, ([, n, year]) => within('quarter', Number(year), Number(n))],
	[/^(\d{4})[- :]?M(\d{1,2})$/i, ([, year, n]) => within('month', Number(year), Number(n))],
	[/^(\d{4})-(\d{2})$/, ([, year, n]) => within('month', Number(year), Number(n))],
	[
		/^(\d{4}):(\d{1,2})$/,
		([, year, n]) =>
			Number(year) >= 1 && Number(n) >= 1 && Number(n) <= 12
				? { kind: 'part', year: Number(year), within: Number(n) }
				: fault()
	],
	[
		/^(\d{4})-(\d{1,2})-(\d{1,2})(?:[ T](\d{1,2}):(\d{2})(?::(\d{2}(?:\.\d+)?))?(Z|[+-]\d{2}:?\d{2})?)?$/i,
		dated
	],
	[/^(\d{1,2})([/.-])(\d{1,2})\2(\d{4})([ T].{1,20})?$/, twoWays],
	// Day numbers of a spreadsheet from 1927 to 2173, which no year can be taken for.
	[/^(?:[1-9]\d{4})(?:\.0+)?$/, () => fault('looks-like-serials')]
];

/**
 * Reads one text as a period: a year, 2024Q1, 2024-Q1, Q1 2024, 2024M03, 2024-03, 2024:1, an ISO date (at midnight), or a
 * date of day and month whose order is open.
 */
export const readPeriod = (cell: string): PeriodReading => {
	const text = cell.trim();
	if (text.length > 40) return fault();
	for (const [form, read] of forms) {
		const parts = form.exec(text);
		if (parts) return read(parts);
	}
	return fault();
};
