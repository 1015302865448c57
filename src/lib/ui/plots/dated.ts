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
	/** In the right half a label stands left of its line. */
	readonly turned: boolean;
	/** Row of its label from the top. */
	readonly row: number;
}

const ROWS = 3;

/**
 * Marks that fall within the periods, in order of time. Lines begin at their label; labels that run towards other
 * lines stand above the beginning of those, so that no line passes through a label.
 */
export function datedLines(periods: readonly string[], marks: readonly DatedMark[]): readonly DatedLine[] {
	const lines = marks
		.map((mark) => ({ mark, index: periods.indexOf(mark.period) }))
		.filter(({ index }) => index >= 0)
		.map((line) => ({ ...line, turned: line.index > (periods.length - 1) / 2 }))
		.sort((a, b) => a.index - b.index);
	return lines.map((line, i) => ({ ...line, row: (line.turned ? lines.length - 1 - i : i) % ROWS }));
}
