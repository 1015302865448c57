import type { Snippet } from 'svelte';

/** What every plot takes beside its data. */
export interface PlotProps {
	/** Where its numbers are as CSV. */
	readonly csvHref: string;
	readonly caption?: Snippet | undefined;
	readonly id?: string | undefined;
}

/** The numbers of a plot as text, one row a period or lag. */
export interface PlotTable {
	readonly heads: readonly string[];
	readonly rows: readonly (readonly string[])[];
}
