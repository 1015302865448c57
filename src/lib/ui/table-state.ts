/** A table's columns and its state, which lives in the address: `?sort=-due&tier=1&find=loan&page=2`. */
import type { Snippet } from 'svelte';

export interface Column<Row> {
	readonly id: string;
	readonly header: string;
	/** Second line of the head. */
	readonly header2?: string;
	/** Head over neighbouring columns of one kind. */
	readonly group?: string;
	/** What is sorted, filtered and shown when there is no `cell`. */
	readonly value: (row: Row) => string | number | null;
	readonly align?: 'left' | 'right';
	readonly sortable?: boolean;
	readonly filter?: 'choice' | 'text';
	readonly filterLabel?: string;
	/** Words for a value in the choice of a filter. */
	readonly choiceLabel?: (value: string) => string;
	/** Digits after the point of a plain number; none unless said. */
	readonly decimals?: number;
	/** Class of the cells: `due`; `wrap` for prose of several lines. */
	readonly cellClass?: string;
	readonly cell?: Snippet<[Row]>;
}

/** What a column needs to be read from an address. */
type Addressed = Pick<Column<never>, 'id' | 'filter'>;

export interface TableState {
	readonly sort: { readonly id: string; readonly desc: boolean } | null;
	/** Only filters that are set. */
	readonly filters: readonly { readonly id: string; readonly value: string }[];
	readonly find: string;
	/** Counts from 1. */
	readonly page: number;
}

/** Reads the state from an address; what names no column is left alone. */
export function readTableState(params: URLSearchParams, columns: readonly Addressed[]): TableState {
	const raw = params.get('sort') ?? '';
	const id = raw.replace(/^-/, '');
	const page = Number(params.get('page') ?? '1');
	return {
		sort: columns.some((column) => column.id === id) ? { id, desc: raw.startsWith('-') } : null,
		filters: columns
			.filter((column) => column.filter)
			.map((column) => ({ id: column.id, value: params.get(column.id) ?? '' }))
			.filter(({ value }) => value !== ''),
		find: params.get('find') ?? '',
		page: Number.isSafeInteger(page) && page > 0 ? page : 1
	};
}

/** The same page with some parameters changed; an empty value removes its parameter. */
export function addressWith(url: URL, change: Readonly<Record<string, string>>): string {
	const params = new URLSearchParams(url.searchParams);
	for (const [name, value] of Object.entries(change)) {
		if (value === '') params.delete(name);
		else params.set(name, value);
	}
	const query = params.toString();
	return query === '' ? url.pathname : `${url.pathname}?${query}`;
}

/** Where a column's head leads: ascending first, then descending, then as it came; always the first page. */
export function sortAddress(url: URL, state: TableState, id: string): string {
	const sorted = state.sort?.id === id ? state.sort : null;
	const next = sorted === null ? id : sorted.desc ? '' : `-${id}`;
	return addressWith(url, { sort: next, page: '' });
}

/** Orders what two cells hold: numbers by size, words by the figures in them (M-9 before M-10). */
export function compareValues(a: string | number, b: string | number): number {
	if (typeof a === 'number' && typeof b === 'number') return a - b;
	return String(a).localeCompare(String(b), 'en', { numeric: true });
}

/** The different values of a column, in order, for the choice of its filter. */
export function choicesOf<Row>(rows: readonly Row[], column: Column<Row>): readonly string[] {
	const values = rows.map(column.value).filter((value) => value !== null && value !== '');
	return [...new Set(values.map(String))].sort(compareValues);
}

/** Neighbouring columns under one head. */
export function groupRuns(
	columns: readonly { readonly group?: string }[]
): readonly { group: string; span: number }[] {
	const runs: { group: string; span: number }[] = [];
	for (const { group = '' } of columns) {
		const last = runs.at(-1);
		if (last && last.group === group) last.span += 1;
		else runs.push({ group, span: 1 });
	}
	return runs;
}
