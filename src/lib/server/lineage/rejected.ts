import { uploadIssue, type sentences, type UploadCode, type UploadIssue } from '$lib/domain/lineage-codes';

/** One way to settle a question about a file. */
export interface Option {
	readonly value: string;
	readonly label: string;
}

/** A question that only the uploader can answer, and the choice that answers it. */
export interface Question {
	readonly choice: 'delimiter' | 'decimal' | 'dateOrder' | 'sheet' | 'headerRow' | 'range';
	readonly options: readonly Option[];
	/** What the file suggests; never taken without being asked. */
	readonly proposal?: string;
}

/** Ends the reading of a file; caught by parseUpload alone. */
export class Rejected extends Error {
	override readonly name = 'Rejected';
	constructor(
		readonly issues: readonly UploadIssue[],
		readonly questions: readonly Question[] = []
	) {
		super(issues[0]?.message);
	}
}

/** Ends the reading with one issue of the closed list. */
export const reject = <C extends UploadCode>(
	code: C,
	words: Parameters<(typeof sentences)[C]>,
	place: { readonly row?: number; readonly column?: string } = {},
	questions: readonly Question[] = []
): never => {
	throw new Rejected([uploadIssue(code, words, place)], questions);
};

/** Text of a file as it may stand in a message: one line, short. */
export const shown = (text: string): string => {
	const line = text.replace(/\p{Cc}/gu, '\ufffd');
	return line.length > 40 ? `${line.slice(0, 39)}…` : line;
};
