import { isRefusal, refuse, type Refusal } from '../refusal';
import { periodAt, type Timeline } from './timeline';
import { applyStep, type StepContext, type TransformStep } from './transform-step';

/** A column of the data: one value a period, null or NaN where it is blank. */
export type Column = readonly (number | null)[] | Float64Array;

/** A series after its chain of steps. */
export interface Transformed {
	readonly name: string;
	/** Aligned with the timeline; NaN before `first` and after `last`. */
	readonly values: Float64Array;
	/** First and last row with a value (0-based). */
	readonly first: number;
	readonly last: number;
	/** The series before each step, in order, and after the last: what an inverse starts from. */
	readonly stages: readonly Float64Array[];
}

/**
 * Applies a chain of steps in order; every step refuses for itself. After leading and trailing blanks are trimmed an
 * inner blank is a `gap`: a dropped row would silently change what a lag means. Refuses also `non-finite`, `domain`
 * and `too-short`, naming series and period.
 */
export function transform(
	name: string,
	column: Column,
	steps: readonly TransformStep[],
	timeline: Timeline,
	columns: ReadonlyMap<string, Column>
): Transformed | Refusal {
	const at = (row: number): string => `${name} in ${periodAt(timeline, row)}`;
	const context: StepContext = {
		perYear: timeline.perYear,
		column: (other) => {
			const found = columns.get(other);
			return found && blanksAsNaN(found);
		}
	};
	const stages = [blanksAsNaN(column)];
	const refusal = faultOf(stages[0]!, at, name);
	if (refusal) return refusal;
	for (const step of steps) {
		const outcome = applyStep(stages[stages.length - 1]!, step, context);
		if ('row' in outcome)
			return refuse('domain', `The value of ${at(outcome.row)} ${outcome.why} (step ${step.step}).`);
		const fault = faultOf(outcome.values, at, name);
		if (fault) return fault;
		stages.push(outcome.values);
	}
	const values = stages[stages.length - 1]!;
	const [first, last] = present(values);
	return Object.freeze({ name, values, first, last, stages: Object.freeze(stages) });
}

/** The rows over which every series has a value, or the refusal that there are none. */
export function commonRows(series: readonly Transformed[]): { first: number; last: number } | Refusal {
	const first = Math.max(...series.map((s) => s.first));
	const last = Math.min(...series.map((s) => s.last));
	if (first > last) return refuse('too-short', 'The series have no period in common.');
	return { first, last };
}

/** The common sample of several series: each cut to the rows where all have a value. */
export function completeCases(series: readonly Transformed[]): readonly Float64Array[] | Refusal {
	const rows = commonRows(series);
	if (isRefusal(rows)) return rows;
	return series.map((s) => s.values.slice(rows.first, rows.last + 1));
}

const blanksAsNaN = (column: Column): Float64Array => Float64Array.from(column, (value) => value ?? NaN);

function present(values: Float64Array): [first: number, last: number] {
	const first = values.findIndex((value) => !Number.isNaN(value));
	let last = values.length - 1;
	while (last >= 0 && Number.isNaN(values[last]!)) last--;
	return [first, last];
}

function faultOf(values: Float64Array, at: (row: number) => string, name: string): Refusal | undefined {
	const [first, last] = present(values);
	if (first < 0) return refuse('too-short', `The series ${name} has no value left.`);
	for (let row = first; row <= last; row++) {
		if (Number.isNaN(values[row]!)) return refuse('gap', `The value of ${at(row)} is missing.`);
		if (!Number.isFinite(values[row]!))
			return refuse('non-finite', `The value of ${at(row)} is not a finite number.`);
	}
	return undefined;
}
