/** Dates named on a plot as vertical lines. */
export interface DatedMark {
	readonly period: string;
	readonly label: string;
	/** Found by a test or crossed: drawn in the colour of limits. */
	readonly limit?: boolean | undefined;
}

export interface DatedLine {
	readonly mark: DatedMark;
	readonly index: number;
	/** Row of its label, so that neighbours do not cover each other. */
	readonly row: number;
}

/** Marks that fall within the periods, in order of time; three rows of labels in turn. */
export function datedLines(periods: readonly string[], marks: readonly DatedMark[]): readonly DatedLine[] {
	return marks
		.map((mark) => ({ mark, index: periods.indexOf(mark.period) }))
		.filter(({ index }) => index >= 0)
		.sort((a, b) => a.index - b.index)
		.map((line, i) => ({ ...line, row: i % 3 }));
}
