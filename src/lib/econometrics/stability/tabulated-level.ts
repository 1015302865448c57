/** What a table of critical values says about the p-value of a statistic that rejects when large. */
export interface TabulatedLevel {
	/** The two neighbouring levels: the p-value lies between them (0 and 1 at the ends). */
	readonly pBetween: readonly [low: number, high: number];
	/** Interpolated linearly in the logarithm of the level, an approximation; null outside the tabulated levels. */
	readonly pApproximate: number | null;
}

/** Reads a statistic off critical values given at falling levels. */
export function tabulatedLevel(
	stat: number,
	critical: readonly number[],
	levels: readonly number[]
): TabulatedLevel {
	const exceeded = critical.filter((value) => stat >= value).length;
	const high = levels[exceeded - 1] ?? 1;
	const low = levels[exceeded] ?? 0;
	const pBetween = Object.freeze([low, high] as const);
	if (exceeded === 0 || exceeded === critical.length) return { pBetween, pApproximate: null };
	const share = (stat - critical[exceeded - 1]!) / (critical[exceeded]! - critical[exceeded - 1]!);
	return { pBetween, pApproximate: Math.exp((1 - share) * Math.log(high) + share * Math.log(low)) };
}
