/** Dates that a plot of the level names. */
import type { Check } from '$lib/domain/run-result';

export interface BreakMark {
	readonly period: string;
	readonly label: string;
	readonly limit: true;
}

/** The date of the largest break statistic, where the test found a sign of a break. */
export function breakMarks(checks: readonly Check[]): readonly BreakMark[] {
	const found = checks.find(({ id }) => id === 'stability.sup-f');
	const period = found?.parameters['breakFrom'];
	return found?.rejected && typeof period === 'string'
		? [{ period, label: 'break, sup-F', limit: true }]
		: [];
}
