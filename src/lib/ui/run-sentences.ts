/** The sentences under the equation of a run: speed and half-life, each long-run slope, where the last period stands. */
import type { RunResult } from '$lib/domain/run-result';
import type { SeriesSpecification, Specification } from '$lib/domain/specification';
import { adjustmentSentence, gapSentence, longRunSentence, type Measure } from './sentence';

/** Steps that leave the measure of a series as it is. */
const NEUTRAL = new Set(['lag', 'mean']);

/** How a series is measured after its transforms. */
export function measureOf({ name, unit, transform }: SeriesSpecification): Measure {
	const last = transform.map(({ step }) => step).findLast((step) => !NEUTRAL.has(step));
	if (last === 'log') return { name, kind: 'log' };
	if (last === undefined && /^\s*(%|per ?cent|percentage)/i.test(unit)) return { name, kind: 'points' };
	// Any other step changes the unit in a way that has no short name.
	const kept = last === undefined ? unit.trim() : '';
	return { name, kind: 'units', ...(kept && { unit: kept }) };
}

function measure(spec: Specification, name: string): Measure {
	const series = spec.series.find((each) => each.name === name);
	return series ? measureOf(series) : { name, kind: 'units' };
}

export interface RunSentences {
	readonly sentences: readonly string[];
	readonly gap?: { readonly lead: string; readonly marked: string };
}

/** All sentences of a run; none where nothing was estimated. */
export function runSentences({
	specification,
	estimates,
	model
}: Pick<RunResult, 'specification' | 'estimates' | 'model'>): RunSentences {
	if (!estimates) return { sentences: [] };
	const dependent = measure(specification, specification.dependent);
	const speed = {
		speed: estimates.speed.value,
		halfLife: estimates.halfLife.value,
		frequency: specification.frequency
	};
	const slopes = estimates.longRun
		.filter(({ term }) => term.kind === 'level')
		.map(({ term, value }) => longRunSentence(measure(specification, term.series ?? ''), dependent, value));
	const last = model?.gap.findLastIndex((value) => value !== null) ?? -1;
	const gap = model?.gap[last] ?? null;
	const sentences = [adjustmentSentence(speed), ...slopes];
	if (!model?.gapSd || gap === null) return { sentences };
	const { lead, marked } = gapSentence({
		period: model.periods[last] ?? '',
		dependent,
		gap,
		sd: model.gapSd
	});
	return { sentences, gap: { lead, marked } };
}
