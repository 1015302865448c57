import type { Choices, ParsedTable } from '$lib/domain/lineage';
import { questionCodes, uploadIssue, type UploadIssue } from '$lib/domain/lineage-codes';
import { limits } from '$lib/domain/lineage';
import { readCsv } from './csv';
import { detect, type Media } from './detect';
import { Rejected, type Question } from './rejected';
import type { LeftOutColumn } from './column-reader';
import { readTable } from './table';
import { readWorkbook } from './xlsx';

export interface ParseInput {
	readonly bytes: Uint8Array;
	readonly choices: Choices;
}

export interface SheetName {
	readonly name: string;
	readonly state: 'visible' | 'hidden' | 'very hidden';
}

/** A file as read: plain data, so that it can cross from a worker. */
export interface ParsedUpload {
	readonly state: 'parsed';
	readonly media: Media;
	/** How it was read, in words: encoding and delimiter, or the sheet. */
	readonly how: string;
	readonly sheet?: string;
	readonly sheets?: readonly SheetName[];
	readonly periodColumn: string;
	readonly leftOut: readonly LeftOutColumn[];
	readonly table: ParsedTable;
}

export type ParseOutcome =
	| ParsedUpload
	/** A choice of the uploader is needed; the file itself may be fine. */
	| {
			readonly state: 'question';
			readonly issues: readonly UploadIssue[];
			readonly questions: readonly Question[];
	  }
	| { readonly state: 'refused'; readonly issues: readonly UploadIssue[] };

const delimiterWords = { ',': 'comma', ';': 'semicolon', '\t': 'tab', '|': 'vertical bar' } as const;

const read = async ({ bytes, choices }: ParseInput): Promise<ParsedUpload> => {
	if (bytes.length > limits.bytes)
		throw new Rejected([uploadIssue('too-large', [limits.bytes / (1024 * 1024)])]);
	if (detect(bytes) === 'csv') {
		const { grid, delimiter, encoding } = readCsv(bytes, choices);
		const how = `CSV, ${encoding}, separated by ${delimiterWords[delimiter]}`;
		return { state: 'parsed', media: 'csv', how, ...readTable(grid, choices) };
	}
	const { grid, sheet, sheets } = await readWorkbook(bytes, choices);
	const names = sheets.map(({ name, state }) => ({ name, state }));
	return {
		state: 'parsed',
		media: 'xlsx',
		how: `workbook, sheet ${sheet}`,
		sheet,
		sheets: names,
		...readTable(grid, choices)
	};
};

/**
 * Reads a file into a table of numbers over periods, or says why not. Pure: bytes and choices in, plain data out; runs
 * in a worker. Bytes are judged by content alone, and nothing outside of them is looked at.
 */
export const parseUpload = async (input: ParseInput): Promise<ParseOutcome> => {
	try {
		return await read(input);
	} catch (error) {
		if (!(error instanceof Rejected)) throw error;
		const { issues, questions } = error;
		return questions.length > 0 && issues.every(({ code }) => questionCodes.has(code))
			? { state: 'question', issues, questions }
			: { state: 'refused', issues };
	}
};
