import type { SpecificationDraft } from '$lib/domain/register-draft';

/** One column of a list of rows in the form of a specification. */
export interface RowColumn {
	readonly id: string;
	readonly label: string;
	readonly size?: number;
	/** A choice instead of free text. */
	readonly options?: readonly { readonly value: string; readonly label: string }[];
	/** Words offered while typing. */
	readonly offers?: readonly string[];
	readonly wide?: boolean;
}

/** Names offered as a choice, with whatever stands in the row now. */
export const namesAsOptions = (
	names: readonly string[],
	rows: readonly Readonly<Record<string, string>>[],
	column: string
): { value: string; label: string }[] => {
	const all = new Set([...names.filter((name) => name !== ''), ...rows.map((row) => row[column] ?? '')]);
	all.delete('');
	return [{ value: '', label: '' }, ...[...all].map((name) => ({ value: name, label: name }))];
};

interface Option {
	readonly value: string;
	readonly label: string;
}

const plain = (...values: readonly string[]): Option[] => values.map((value) => ({ value, label: value }));

export const frequencies = plain('quarterly', 'monthly', 'annual');
export const dummyKinds = plain('pulse', 'step', 'seasonal');
export const dummyPlaces = plain('short', 'long', 'both');

export const estimators: readonly Option[] = [
	{ value: 'two-step', label: 'two steps: the long run first' },
	{ value: 'one-step', label: 'one step: levels and differences together' },
	{ value: 'imposed', label: 'long run imposed: constant and slopes are given' },
	{ value: 'elsewhere', label: 'estimated elsewhere: all coefficients are given' }
];

export const standardErrors: readonly Option[] = [
	{ value: 'ols', label: 'ordinary' },
	{ value: 'hc3', label: 'robust to heteroskedasticity (HC3)' },
	{ value: 'hac', label: 'robust to autocorrelation too (HAC)' }
];

type Writable<T> = { -readonly [K in keyof T]: T[K] };

/** The form's state while it is typed: each cell is bound to its control. */
export type TypedDraft = {
	-readonly [K in keyof SpecificationDraft]: SpecificationDraft[K] extends readonly (infer Row)[]
		? Writable<Row>[]
		: SpecificationDraft[K];
};
