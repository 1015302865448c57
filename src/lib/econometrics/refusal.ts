/** Why a computation was refused; the battery turns it into *not assessable* with the sentence. */
export type Reason =
	| 'non-finite'
	| 'domain'
	| 'gap'
	| 'duplicate'
	| 'frequency'
	| 'constant'
	| 'too-short'
	| 'rank'
	| 'perfect-fit'
	| 'empty-trim'
	| 'first-rows'
	| 'no-variance'
	| 'lag'
	| 'table'
	| 'no-scenario'
	| 'not-observable'
	| 'needs-cointegration'
	| 'no-approved-version'
	| 'no-horizon'
	| 'given';

/** A computation that was not made: never NaN, never an exception for bad data. */
export interface Refusal {
	readonly refused: Reason;
	/** A sentence that names the series, period or count at fault. */
	readonly detail: string;
}

export const refuse = (refused: Reason, detail: string): Refusal => Object.freeze({ refused, detail });

export const isRefusal = (value: unknown): value is Refusal =>
	typeof value === 'object' && value !== null && 'refused' in value;
