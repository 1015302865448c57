import type { Choices } from '$lib/domain/lineage';
import { choicesSchema } from '$lib/domain/lineage';
import type { VintageInput } from '$lib/domain/lineage-input';

/** Fields of one column, as typed. */
export interface TypedColumn {
	readonly column: string;
	readonly role: string;
	readonly unit: string;
	readonly source: string;
	readonly code: string;
	readonly vintageDate: string;
	readonly seasonal: string;
	readonly notes: string;
}

/** The confirmation as typed. */
export interface Typed {
	readonly dataset: string;
	readonly name: string;
	readonly vintageDate: string;
	/** Provider of every column that names none. */
	readonly source: string;
	readonly columns: readonly TypedColumn[];
}

const mostColumns = 256;

/** Choices from an address: `?sheet=Data&headerRow=2`; what is not one of them is left out. */
export const choicesOf = (params: URLSearchParams): Choices => {
	const given: Record<string, unknown> = {};
	for (const name of Object.keys(choicesSchema.shape)) {
		const value = params.get(name);
		if (value) given[name] = name === 'headerRow' ? Number(value) : value;
	}
	const parsed = choicesSchema.safeParse(given);
	return parsed.success ? parsed.data : {};
};

/** Reads the form's fields, `columns.0.unit` and so on. */
export const typedOf = (data: FormData): Typed => {
	const text = (name: string): string => {
		const value = data.get(name);
		return typeof value === 'string' ? value : '';
	};
	const columns: TypedColumn[] = [];
	for (let i = 0; i < mostColumns && data.has(`columns.${i}.column`); i++) {
		const field = (name: string): string => text(`columns.${i}.${name}`);
		columns.push({
			column: field('column'),
			role: field('role'),
			unit: field('unit'),
			source: field('source'),
			code: field('code'),
			vintageDate: field('vintageDate'),
			seasonal: field('seasonal'),
			notes: field('notes')
		});
	}
	return {
		dataset: text('dataset'),
		name: text('name'),
		vintageDate: text('vintageDate'),
		source: text('source'),
		columns
	};
};

/** What the verb is given: a column without provider takes the one given for all; `new` opens a dataset. */
export const inputOf = (
	typed: Typed,
	upload: { readonly upload: string; readonly sha256: string; readonly choices: Choices }
): VintageInput => ({
	...upload,
	dataset: typed.dataset === 'new' ? '' : typed.dataset,
	name: typed.name,
	vintageDate: typed.vintageDate,
	// The verb judges the words; a form can send any.
	columns: typed.columns.map((column) => ({
		...column,
		source: column.source || typed.source
	})) as VintageInput['columns']
});
