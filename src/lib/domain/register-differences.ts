/** One field that differs; a side is absent where it has no such field. */
export interface FieldDifference {
	/** The field's name, or its path where values hold values. */
	readonly field: string;
	readonly before?: unknown;
	readonly after?: unknown;
}

type Json = Readonly<Record<string, unknown>>;

const isRecord = (value: unknown): value is Json =>
	value !== null && typeof value === 'object' && !Array.isArray(value);

/** What names an item of a list: a series that moves up one place did not change. */
const keys = ['name', 'series', 'term'] as const;

const nameOf = (item: unknown): string | undefined =>
	isRecord(item)
		? keys.map((key) => item[key]).find((value): value is string => typeof value === 'string')
		: undefined;

/** The parts of a value that are compared one by one; undefined for one that is compared whole. */
const partsOf = (value: unknown): Json | undefined => {
	if (isRecord(value)) return value;
	if (!Array.isArray(value) || value.length === 0) return undefined;
	const names = value.map(nameOf);
	if (names.some((name) => name === undefined) || new Set(names).size < names.length) return undefined;
	return Object.fromEntries(value.map((item, i) => [names[i]!, item as unknown]));
};

const emptyList = (value: unknown): boolean => Array.isArray(value) && value.length === 0;

const walk = (field: string, before: unknown, after: unknown): FieldDifference[] => {
	const [left, right] = [partsOf(before), partsOf(after)];
	const none = (value: unknown): boolean => value === undefined || emptyList(value);
	if ((left && (right || none(after))) || (right && none(before))) {
		const all = new Set([...Object.keys(left ?? {}), ...Object.keys(right ?? {})]);
		return [...all].flatMap((key) => walk(field === '' ? key : `${field}.${key}`, left?.[key], right?.[key]));
	}
	if (JSON.stringify(before) === JSON.stringify(after)) return [];
	return [{ field, ...(before !== undefined && { before }), ...(after !== undefined && { after }) }];
};

/** Every field that differs between two values; items of lists are matched by their names. */
export const fieldDifferences = (before: unknown, after: unknown): readonly FieldDifference[] =>
	walk('', before, after);
