/** A clock that tests move: it stands still until told. */
export interface Clock {
	readonly now: () => Date;
	/** Moves forward by milliseconds (or back, with a negative number). */
	readonly forward: (milliseconds: number) => void;
	readonly set: (instant: string) => void;
}

export const testClock = (start: string): Clock => {
	let time = Date.parse(start);
	return {
		now: () => new Date(time),
		forward: (milliseconds) => void (time += milliseconds),
		set: (instant) => void (time = Date.parse(instant))
	};
};
