/** Estimates of one coefficient by several people, on one axis. */

export interface Interval {
	readonly value: number;
	readonly low: number;
	readonly high: number;
}

export interface Estimates {
	readonly claimed?: number | undefined;
	readonly owner?: Interval | undefined;
	readonly validator?: Interval | undefined;
}

/** The least and largest number that must be shown. */
export function extentOf({ claimed, owner, validator }: Estimates): readonly [number, number] {
	const numbers = [claimed, owner?.low, owner?.high, validator?.low, validator?.high];
	const known = numbers.filter((n): n is number => n !== undefined);
	return known.length === 0 ? [0, 1] : [Math.min(...known), Math.max(...known)];
}
