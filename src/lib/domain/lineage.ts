import { z } from 'zod';
import type { Frequency } from './period';

/** Something worth saying about data that were accepted: how they were read, or what is odd in them. */
export interface Note {
	readonly code: string;
	readonly message: string;
	readonly column?: string;
	readonly period?: string;
}

export interface ParsedColumn {
	readonly name: string;
	/** As long as the periods; null is missing; finite, no negative zero. */
	readonly values: readonly (number | null)[];
}

/** A file read as numbers over periods: sorted, distinct periods; a period the file does not name is not here. */
export interface ParsedTable {
	readonly frequency: Frequency;
	readonly periods: readonly string[];
	readonly columns: readonly ParsedColumn[];
	/** How the file was read. */
	readonly notes: readonly Note[];
}

/** Bounds of what is taken. */
export const limits = Object.freeze({
	bytes: 25 * 1024 * 1024,
	rows: 200_000,
	columns: 256,
	cells: 2_000_000,
	cellCharacters: 32_767,
	lineCharacters: 1024 * 1024,
	series: 128,
	leastObservations: 4,
	mostObservations: 20_000
});

/** What the person who uploads decides where a file can be read in more than one way. */
export const choicesSchema = z.strictObject({
	delimiter: z.enum([',', ';', '\t', '|']).optional(),
	decimal: z.enum(['.', ',']).optional(),
	dateOrder: z.enum(['dmy', 'mdy']).optional(),
	sheet: z.string().max(64).optional(),
	/** Row of the file that names the columns, counted from 1; 0 when no row does. */
	headerRow: z.int().min(0).max(limits.rows).optional(),
	/** Cells that hold the table, such as A3:F120. */
	range: z
		.string()
		.regex(/^[A-Z]{1,3}[1-9]\d{0,6}:[A-Z]{1,3}[1-9]\d{0,6}$/, 'A range is written like A3:F120.')
		.optional(),
	periodColumn: z.string().max(200).optional()
});
export type Choices = z.output<typeof choicesSchema>;

export const columnRoles = ['observed', 'scenario', 'left-out'] as const;
export type ColumnRole = (typeof columnRoles)[number];

export const seasonalAdjustments = ['none', 'adjusted', 'unadjusted', 'unknown'] as const;
export type SeasonalAdjustment = (typeof seasonalAdjustments)[number];

/** The seasonal adjustment in words. */
export const seasonalWords: Readonly<Record<SeasonalAdjustment, string>> = Object.freeze({
	none: 'not seasonal',
	adjusted: 'seasonally adjusted',
	unadjusted: 'not adjusted',
	unknown: 'not known'
});

/** Identity of a series across models: its provider and its code there, in one spelling. */
export const seriesId = (source: string, code: string): string => {
	const plain = (text: string): string =>
		text.normalize('NFKC').toLowerCase().replace(/\s+/gu, ' ').replace(/\//gu, '∕').trim();
	return `${plain(source)}/${plain(code)}`;
};
