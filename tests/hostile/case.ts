import type { Choices } from '$lib/domain/lineage';
import type { UploadCode } from '$lib/domain/lineage-codes';

/** What must become of a file: accepted with these notes, or refused with this code at this place. */
export interface Expected {
	readonly verdict: 'A' | 'R';
	readonly code?: UploadCode;
	readonly row?: number;
	readonly column?: string;
	/** Codes of notes and findings that must be among those given. */
	readonly notes?: readonly string[];
	/** First figures of the first column. */
	readonly figures?: readonly (number | null)[];
	readonly choices?: Choices;
}

/** A file by the number of its family, its name and its bytes. */
export interface Case {
	readonly name: string;
	readonly bytes: Uint8Array;
	readonly expected: Expected;
}
