/** One thing wrong with an input: where, and how to mend it. */
export interface Issue {
	/** JSON pointer of the field, "" for the whole. */
	readonly pointer: string;
	readonly message: string;
	/** Closed code, where a list of codes exists (uploads). */
	readonly code?: string;
	/** 1-based row and column of a file or pasted table. */
	readonly row?: number;
	readonly column?: string;
}

/** The input cannot be taken: nothing was stored. */
export class Invalid extends Error {
	override readonly name = 'Invalid';
	constructor(readonly issues: readonly Issue[]) {
		super(issues[0]?.message ?? 'The input is not valid.');
	}
}

/** There is no such thing, or the asker may not know that there is. */
export class Absent extends Error {
	override readonly name = 'Absent';
}

/** A rule forbids it. Entered in the log as `access.refused`. */
export class Refused extends Error {
	override readonly name = 'Refused';
	constructor(
		/** Name of the rule that refused, as in the permission table. */
		readonly rule: string,
		readonly action: string,
		message: string,
		/** False where the asker must not learn that the subject exists: answered as absent. */
		readonly visible: boolean = true,
		readonly subject?: string
	) {
		super(message);
	}
}

/** The state moved meanwhile, or does not allow the step. */
export class Conflict extends Error {
	override readonly name = 'Conflict';
}
