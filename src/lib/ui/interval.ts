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

/** The least and largest number that must be shown; a single one gets room on both sides. */
export function extentOf({ claimed, owner, validator }: Estimates): readonly [number, number] {
	const numbers = [claimed, owner?.low, owner?.high, validator?.low, validator?.high];
	const known = numbers.filter((n): n is number => n !== undefined);
	if (known.length === 0) return [0, 1];
	const [low, high] = [Math.min(...known), Math.max(...known)];
	const room = low === high ? Math.abs(low) / 2 || 1 : 0;
	return [low - room, high + room];
}
