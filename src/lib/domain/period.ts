/** Periods of one frequency, as people write them: `1974`, `1974-Q1`, `1974-03`. */
export const frequencies = ['annual', 'quarterly', 'monthly'] as const;
export type Frequency = (typeof frequencies)[number];

/** Periods per year: 1, 4 or 12. */
export const periodsPerYear: Readonly<Record<Frequency, number>> = Object.freeze({
	annual: 1,
	quarterly: 4,
	monthly: 12
});

const shapes: Readonly<Record<Frequency, RegExp>> = {
	annual: /^(\d{4})$/,
	quarterly: /^(\d{4})-Q([1-4])$/,
	monthly: /^(\d{4})-(0[1-9]|1[0-2])$/
};

/** How a period of the frequency is written, for messages. */
export const periodExample: Readonly<Record<Frequency, string>> = Object.freeze({
	annual: '1974',
	quarterly: '1974-Q1',
	monthly: '1974-03'
});

/** Number of the period counted from year 0; undefined when the text is not a period of that frequency. */
export const periodIndex = (text: string, frequency: Frequency): number | undefined => {
	const parts = shapes[frequency].exec(text);
	if (!parts) return undefined;
	return Number(parts[1]) * periodsPerYear[frequency] + (parts[2] === undefined ? 0 : Number(parts[2]) - 1);
};

/** The period with that number, as `periodIndex` counts. */
export const periodText = (index: number, frequency: Frequency): string => {
	const perYear = periodsPerYear[frequency];
	const year = String(Math.floor(index / perYear)).padStart(4, '0');
	const within = (((index % perYear) + perYear) % perYear) + 1;
	if (frequency === 'annual') return year;
	return frequency === 'quarterly' ? `${year}-Q${within}` : `${year}-${String(within).padStart(2, '0')}`;
};

/** Number of the period within its year, 1..f. */
export const periodOfYear = (index: number, frequency: Frequency): number =>
	(index % periodsPerYear[frequency]) + 1;

/** The frequency a text is a period of, judged by its shape. */
export const frequencyOf = (text: string): Frequency | undefined =>
	frequencies.find((frequency) => shapes[frequency].test(text));
