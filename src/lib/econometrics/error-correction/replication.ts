import { refuse, type Refusal } from '../refusal';

/** A figure as somebody typed it. */
export interface TypedFigure {
	readonly value: number;
	/** Places after the point that the text fixes: 3 for 0.187, 5 for 1.87e-3, -2 for 12e2. */
	readonly decimals: number;
}

/** How far a recomputed value may be from a claimed one beyond the rounding of the text. */
export interface Tolerance {
	readonly absolute: number;
	readonly relative: number;
}

export interface Replication {
	readonly claimed: number;
	readonly decimals: number;
	readonly ours: number;
	/** ours - claimed. */
	readonly difference: number;
	/** Half a unit of the last digit typed. */
	readonly rounding: number;
	/** Which of the two the difference is within, the rounding first; `neither` does not replicate. */
	readonly within: 'rounding' | 'tolerance' | 'neither';
}

// U+2212 minus, U+2010 to U+2013 hyphens and en dash, U+FE63 and U+FF0D small and full-width forms.
const MINUS = /^[\u2212\u2010-\u2013\uFE63\uFF0D]/;
const FIGURE = /^([+-]?)(\d*)(?:\.(\d*))?(?:e([+-]?\d+))?$/i;

/**
 * Reads a figure and the number of decimals its text fixes. Accepts typographic minus signs and exponents; the
 * decimal sign is a point. Refuses `domain` for any other text.
 */
export function typedFigure(text: string): TypedFigure | Refusal {
	const plain = text
		.trim()
		.replace(MINUS, '-')
		.replace(/(e)[\u2212\u2010-\u2013\uFE63\uFF0D]/i, '$1-');
	const match = FIGURE.exec(plain);
	const digits = `${match?.[2] ?? ''}${match?.[3] ?? ''}`;
	if (!match || digits === '') return refuse('domain', `"${text}" is not a figure with a decimal point`);
	const value = Number(plain);
	if (!Number.isFinite(value)) return refuse('domain', `"${text}" is outside the range of numbers`);
	return Object.freeze({ value, decimals: (match[3] ?? '').length - Number(match[4] ?? 0) });
}

/**
 * Compares a recomputed value with a claimed text: it replicates within half a unit of the last digit typed, or
 * within the tolerance. A millionth of that unit is left for the representation of decimal fractions.
 */
export function replicate(text: string, ours: number, tolerance: Tolerance): Replication | Refusal {
	const typed = typedFigure(text);
	if ('refused' in typed) return typed;
	if (!Number.isFinite(ours)) return refuse('non-finite', 'the recomputed value is not a finite number');
	const difference = ours - typed.value;
	const rounding = 0.5 * 10 ** -typed.decimals;
	const allowed = Math.max(tolerance.absolute, tolerance.relative * Math.abs(typed.value));
	const distance = Math.abs(difference);
	return Object.freeze({
		claimed: typed.value,
		decimals: typed.decimals,
		ours,
		difference,
		rounding,
		within: distance <= rounding * (1 + 1e-6) ? 'rounding' : distance <= allowed ? 'tolerance' : 'neither'
	});
}
