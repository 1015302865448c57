import { readFileSync, readdirSync } from 'node:fs';
import { isRefusal, type Refusal } from '$lib/econometrics/refusal';

/**
 * Reads the reference cases and holds computed values against them, each check at its own tolerance. Where the figures
 * come from stands in SOURCES.md.
 */
export interface EcmModel {
	readonly y: string;
	readonly x: readonly string[];
	readonly det: 'c' | 'ct';
	readonly p: number;
	readonly q: number | readonly number[];
}
export interface RegressionModel {
	readonly type: 'regression';
	readonly y: string;
	readonly x: string | readonly string[];
	readonly const: boolean;
}
export interface Check {
	readonly id: string;
	readonly method: string;
	readonly on: string;
	readonly params: Readonly<Record<string, unknown>>;
	readonly values: Readonly<Record<string, unknown>>;
	readonly rtol: number;
}
export interface Case {
	readonly case: string;
	readonly csv: string;
	readonly frequency?: number;
	readonly transforms: Readonly<Record<string, string>>;
	readonly T: number;
	readonly series: Readonly<Record<string, readonly (number | string | null)[]>>;
	readonly model?: EcmModel | RegressionModel;
	readonly checks: readonly Check[];
}

const folder = new URL('./cases/', import.meta.url);

export const caseNames: readonly string[] = readdirSync(folder)
	.filter((file) => file.endsWith('.json'))
	.map((file) => file.slice(0, -5))
	.sort();

export const loadCase = (name: string): Case =>
	JSON.parse(readFileSync(new URL(`${name}.json`, folder), 'utf8')) as Case;

export const loadCsv = (file: string): string => readFileSync(new URL(file, folder), 'utf8');

/** Every check of the given method, with its case. */
export const checksOf = (method: string): { of: Case; check: Check }[] =>
	caseNames
		.map(loadCase)
		.flatMap((of) => of.checks.filter((c) => c.method === method).map((check) => ({ of, check })));

/** A series of a case without its missing values. */
export const seriesOf = (of: Case, name: string): Float64Array =>
	Float64Array.from((of.series[name] ?? []).filter((v): v is number => typeof v === 'number'));

/** A list, also where the file holds a bare value for a list of one. */
export const listOf = <T>(value: T | readonly T[]): readonly T[] =>
	Array.isArray(value) ? value : [value as T];

/** The value, or a failed test that says why there is none. */
export function must<T>(value: T | Refusal): T {
	if (isRefusal(value)) throw new Error(`${value.refused}: ${value.detail}`);
	return value;
}

/** What a comparison found: how many numbers were held against each other, and every one that is off or missing. */
export interface Comparison {
	compared: number;
	readonly differences: string[];
}

/**
 * Holds computed values against those of a check; keys named in `except` are left out, any other missing key is a
 * difference. A scalar may be off by rtol * max(|b|, 1e-6), an array by rtol times its largest entry, a p-value also by
 * 1e-10; whole numbers and words must be equal.
 */
export function compare(
	check: Check,
	computed: Readonly<Record<string, unknown>>,
	except: readonly string[] = []
): Comparison {
	const found: Comparison = { compared: 0, differences: [] };
	for (const [key, expected] of Object.entries(check.values)) {
		if (!except.includes(key)) hold(found, `${check.id}.${key}`, key, computed[key], expected, check.rtol);
	}
	return found;
}

const isPValue = (key: string): boolean =>
	key === 'p' || key.endsWith('_p') || key.startsWith('p_') || key.startsWith('pvalue');

function hold(
	found: Comparison,
	path: string,
	key: string,
	got: unknown,
	expected: unknown,
	rtol: number
): void {
	if (typeof expected === 'number')
		return holdNumber(found, path, key, Array.isArray(got) ? got[0] : got, expected, rtol);
	if (Array.isArray(expected)) return holdArray(found, path, got, expected, rtol);
	if (expected !== null && typeof expected === 'object') {
		for (const [name, value] of Object.entries(expected)) {
			const inner = (got as Record<string, unknown> | undefined)?.[name];
			hold(found, `${path}.${name}`, key, inner, value, rtol);
		}
		return;
	}
	found.compared++;
	if (got !== expected) found.differences.push(`${path}: ${String(got)} instead of ${String(expected)}`);
}

function holdNumber(
	found: Comparison,
	path: string,
	key: string,
	got: unknown,
	expected: number,
	rtol: number
): void {
	found.compared++;
	const off = typeof got === 'number' ? Math.abs(got - expected) : NaN;
	const whole = Number.isInteger(expected) && Number.isInteger(got);
	const close = off <= rtol * Math.max(Math.abs(expected), 1e-6) || (isPValue(key) && off <= 1e-10);
	if (whole ? off !== 0 : !close) found.differences.push(`${path}: ${String(got)} instead of ${expected}`);
}

function holdArray(
	found: Comparison,
	path: string,
	got: unknown,
	expected: readonly unknown[],
	rtol: number
): void {
	const want = expected.flat(4) as unknown[];
	const have = nested(got);
	if (have.length !== want.length) {
		found.differences.push(`${path}: ${have.length} values instead of ${want.length}`);
		return;
	}
	const largest = Math.max(...want.map((v) => (typeof v === 'number' ? Math.abs(v) : 0)));
	for (const [i, value] of want.entries()) {
		found.compared++;
		const other = have[i];
		const close =
			typeof value === 'number' && typeof other === 'number'
				? Math.abs(other - value) <= rtol * largest
				: other === value;
		if (!close) found.differences.push(`${path}[${i}]: ${String(other)} instead of ${String(value)}`);
	}
}

function nested(value: unknown): unknown[] {
	if (ArrayBuffer.isView(value)) return [...(value as Float64Array)];
	return Array.isArray(value) ? value.flatMap(nested) : [value];
}

/** An object from names and an array in their order. */
export const byName = (names: readonly string[], values: ArrayLike<number>): Record<string, number> =>
	Object.fromEntries(names.map((name, j) => [name, values[j]!]));
