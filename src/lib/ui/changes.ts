/** Field-level differences of two JSON values, for the log and for two versions of a specification. */

export interface FieldChange {
	/** Path of the field: `shortRun.drivers.0.lags`. */
	readonly field: string;
	/** Undefined where the field did not exist. */
	readonly before?: unknown;
	readonly after?: unknown;
}

function isRecord(value: unknown): value is Record<string, unknown> {
	return typeof value === 'object' && value !== null && !Array.isArray(value);
}

/** Lists of plain values change as a whole; lists of records are walked by position. */
function children(value: unknown): Record<string, unknown> | null {
	if (isRecord(value)) return value;
	if (Array.isArray(value) && value.some((item) => typeof item === 'object' && item !== null)) {
		return Object.fromEntries(value.map((item, index) => [String(index + 1), item as unknown]));
	}
	return null;
}

function walk(field: string, before: unknown, after: unknown, found: FieldChange[]): void {
	const left = children(before);
	const right = children(after);
	if ((left && (right || after === undefined)) || (right && before === undefined)) {
		const keys = new Set([...Object.keys(left ?? {}), ...Object.keys(right ?? {})]);
		for (const key of keys) walk(field ? `${field}.${key}` : key, left?.[key], right?.[key], found);
		return;
	}
	if (JSON.stringify(before) !== JSON.stringify(after)) found.push({ field, before, after });
}

/** Every leaf that differs between two JSON values, in the order of their keys; positions in lists count from 1. */
export function fieldChanges(before: unknown, after: unknown): readonly FieldChange[] {
	const found: FieldChange[] = [];
	walk('', before, after, found);
	return found;
}

/** A leaf as a person reads it. */
export function leafText(value: unknown): string {
	if (value === undefined) return '';
	if (value === null) return 'none';
	if (typeof value === 'string') return value;
	if (Array.isArray(value) && value.length === 0) return 'none';
	if (Array.isArray(value)) return value.map((item) => leafText(item)).join(', ');
	return typeof value === 'object' ? JSON.stringify(value) : String(value);
}
