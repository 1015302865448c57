import { fieldChanges, type FieldChange } from '$lib/ui/changes';

/** A row of the register that an entry changed; a side is absent where there was or is no row. */
export interface RowChange {
	readonly table: string;
	readonly row: string;
	readonly before?: Readonly<Record<string, unknown>>;
	readonly after?: Readonly<Record<string, unknown>>;
}

/** Null says the same as absence on screen: a column without a value. */
const told = (columns: Readonly<Record<string, unknown>> | undefined): Record<string, unknown> =>
	Object.fromEntries(Object.entries(columns ?? {}).filter(([, value]) => value !== null));

/** The fields of a row that differ, each before and after. */
export const changedFields = ({ before, after }: RowChange): readonly FieldChange[] =>
	fieldChanges(told(before), told(after)).map((change) => ({
		...change,
		field: change.field.replaceAll('_', ' ')
	}));
