export interface Crossing {
	/** How many positions lie outside their bounds. */
	readonly count: number;
	/** The first of them. */
	readonly first: number | null;
}

/** Sums that reach a bound by rounding alone have not crossed it. */
const ROUNDING = 1e-9;

/** Where a path leaves its bounds; on the bound counts as inside. */
export function crossing(
	path: readonly number[],
	lower: readonly number[],
	upper: readonly number[]
): Crossing {
	const outside = path.map(
		(value, i) => value < (lower[i] ?? -Infinity) - ROUNDING || value > (upper[i] ?? Infinity) + ROUNDING
	);
	const first = outside.indexOf(true);
	return { count: outside.filter(Boolean).length, first: first < 0 ? null : first };
}
