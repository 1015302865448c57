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
