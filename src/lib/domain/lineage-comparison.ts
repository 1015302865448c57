import type { ParsedColumn, ParsedTable } from './lineage';

/** One figure that differs between two vintages; `size` is |change| over the spread of the earlier series' changes. */
export interface RevisedPoint {
	readonly period: string;
	readonly before: number;
	readonly after: number;
	readonly size: number | null;
}

/** How one column moved from a vintage to the next. */
export interface ColumnComparison {
	readonly name: string;
	readonly change: 'unchanged' | 'rescaled' | 'shifted' | 'revised' | 'no-overlap' | 'added' | 'dropped';
	/** Common periods in which both have a figure. */
	readonly common: number;
	/** Factor of a rescaling or amount of a shift, new over or minus old. */
	readonly by?: number;
	/** Revised points, largest first. */
	readonly revised: readonly RevisedPoint[];
	/** Periods with a figure in the later vintage only, and in the earlier only. */
	readonly newPeriods: readonly string[];
	readonly lostPeriods: readonly string[];
}

export interface VintageComparison {
	readonly columns: readonly ColumnComparison[];
}

/** A spread of log ratios below this is one constant ratio: the rounding of published figures is coarser. */
const sameRatio = 1e-4;

const mean = (values: readonly number[]): number =>
	values.reduce((sum, value) => sum + value, 0) / values.length;

const deviation = (values: readonly number[]): number => {
	if (values.length < 2) return 0;
	const centre = mean(values);
	return Math.sqrt(values.reduce((sum, value) => sum + (value - centre) ** 2, 0) / (values.length - 1));
};

interface Pair {
	readonly period: string;
	readonly before: number;
	readonly after: number;
}

const changesOf = (values: readonly number[]): number[] =>
	values.slice(1).map((value, i) => value - values[i]!);

const rescaledBy = (pairs: readonly Pair[]): number | undefined => {
	if (pairs.length < 3 || !pairs.every(({ before, after }) => before !== 0 && after / before > 0))
		return undefined;
	const ratios = pairs.map(({ before, after }) => Math.log(after / before));
	const centre = mean(ratios);
	// Without the second condition two all but equal vintages would count as rescaled by one.
	return deviation(ratios) < sameRatio && Math.abs(centre) > sameRatio ? Math.exp(centre) : undefined;
};

const shiftedBy = (pairs: readonly Pair[], spread: number): number | undefined => {
	if (pairs.length < 3) return undefined;
	const shifts = pairs.map(({ before, after }) => after - before);
	const centre = mean(shifts);
	return deviation(shifts) <= sameRatio * spread && Math.abs(centre) > sameRatio * spread
		? centre
		: undefined;
};

const revisedPoints = (pairs: readonly Pair[], spread: number): RevisedPoint[] =>
	pairs
		.filter(({ before, after }) => before !== after)
		.map(({ period, before, after }) => ({
			period,
			before,
			after,
			size: spread > 0 ? Math.abs(after - before) / spread : null
		}))
		.sort((a, b) => Math.abs(b.after - b.before) - Math.abs(a.after - a.before));

const figures = (table: ParsedTable, column: ParsedColumn): Map<string, number> => {
	const found = new Map<string, number>();
	column.values.forEach((value, i) => {
		if (value !== null) found.set(table.periods[i]!, value);
	});
	return found;
};

/** Compares two series given as figures by period, in time order. */
export const compareSeries = (
	name: string,
	before: ReadonlyMap<string, number>,
	after: ReadonlyMap<string, number>
): ColumnComparison => {
	const pairs: Pair[] = [];
	for (const [period, value] of before) {
		const later = after.get(period);
		if (later !== undefined) pairs.push({ period, before: value, after: later });
	}
	const base = {
		name,
		common: pairs.length,
		revised: [] as readonly RevisedPoint[],
		newPeriods: [...after.keys()].filter((period) => !before.has(period)),
		lostPeriods: [...before.keys()].filter((period) => !after.has(period))
	};
	if (pairs.length === 0) return { ...base, change: 'no-overlap' };
	if (pairs.every((pair) => pair.before === pair.after)) return { ...base, change: 'unchanged' };
	const factor = rescaledBy(pairs);
	if (factor !== undefined) return { ...base, change: 'rescaled', by: factor };
	const spread = deviation(changesOf([...before.values()]));
	const amount = shiftedBy(pairs, spread);
	if (amount !== undefined) return { ...base, change: 'shifted', by: amount };
	return { ...base, change: 'revised', revised: revisedPoints(pairs, spread) };
};

/**
 * Two vintages side by side, column by column: a constant ratio over the common periods (standard deviation of the log
 * ratio below 1e-4) is a rescaling or rebasing, a constant difference a shift; otherwise the revised points are listed,
 * largest first.
 */
export const compareVintages = (before: ParsedTable, after: ParsedTable): VintageComparison => {
	const earlier = new Map(before.columns.map((column) => [column.name, column]));
	const none: ReadonlyMap<string, number> = new Map();
	const columns: ColumnComparison[] = after.columns.map((column) => {
		const old = earlier.get(column.name);
		earlier.delete(column.name);
		if (!old) return { ...compareSeries(column.name, none, figures(after, column)), change: 'added' };
		return compareSeries(column.name, figures(before, old), figures(after, column));
	});
	for (const column of earlier.values())
		columns.push({ ...compareSeries(column.name, figures(before, column), none), change: 'dropped' });
	return Object.freeze({ columns: Object.freeze(columns) });
};
