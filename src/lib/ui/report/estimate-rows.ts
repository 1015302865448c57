/** The estimates of a run as rows: the long run, the adjustment, the short run. */
import { speedSentence } from '$lib/battery/model-sentences';
import type { Frequency } from '$lib/domain/period';
import { termName } from '$lib/domain/register-term-names';
import type { Estimate, Estimates, RunResult, TermEstimate } from '$lib/domain/run-result';
import { formatP, formatSignificant } from '../format';
import { decimalsFor, figure } from './figures';

export interface EstimateRow {
	readonly name: string;
	readonly value: string;
	readonly se: string | null;
	readonly t: string | null;
	readonly p: string | null;
	/** Imposed, or what else a reader must know. */
	readonly note?: string;
}

export interface EstimateGroup {
	readonly title: string;
	/** How the figures came about. */
	readonly how: string;
	readonly rows: readonly EstimateRow[];
}

const row = (name: string, { value, se, t, p }: Estimate, decimals: number): EstimateRow => ({
	name,
	value: figure(value, decimals),
	se: se === null ? null : figure(se, decimals),
	t: t === null ? null : figure(t),
	p: p === null ? null : formatP(p)
});

const termRow = (estimate: TermEstimate, decimals: number): EstimateRow => ({
	...row(termName(estimate.term).replace(/, long run$/, ''), estimate, decimals),
	...(estimate.fixed && { note: 'imposed' })
});

/** Standard errors, by which digits are chosen; the size itself where there is none. */
const errorsOf = ({ longRun, equation, speed }: Estimates): readonly number[] =>
	[...longRun, ...equation.terms, speed].map(({ se, value }) => se ?? value);

/** Enough decimals for three digits of the smallest standard error of the run. */
export const estimateDecimals = (estimates: Estimates): number => decimalsFor(errorsOf(estimates), 3);

const howLongRun: Readonly<Record<Estimates['estimator'], string>> = {
	'one-step': 'from the levels of the equation; standard errors by the delta method',
	'two-step': 'least squares of the levels; their t-ratios are not t-distributed and are not shown',
	dols: 'dynamic least squares of the levels',
	fm: 'fully modified least squares of the levels',
	imposed: 'imposed by the specification, not estimated',
	elsewhere: 'given by the specification, estimated elsewhere'
};

const periodNouns: Readonly<Record<Frequency, string>> = {
	annual: 'years',
	quarterly: 'quarters',
	monthly: 'months'
};

const halfLifeRow = ({ halfLife }: Estimates, frequency: Frequency): EstimateRow => {
	const { value, low, high, level, note } = halfLife;
	const words = (bound: number | null): string => (bound === null ? 'without end' : formatSignificant(bound));
	const interval =
		value === null
			? note
			: low === null
				? undefined
				: `${100 * level} % interval ${words(low)} to ${words(high)}`;
	return {
		name: `half-life of a shock, ${periodNouns[frequency]}`,
		value: value === null ? 'none' : figure(value),
		se: null,
		t: null,
		p: null,
		...(interval !== undefined && { note: interval })
	};
};

const errorWords = ({ standardErrors: { kind, lag } }: Estimates): string =>
	kind === 'hac'
		? `HAC standard errors${lag === undefined ? '' : `, lag ${lag}`}`
		: `${kind.toUpperCase()} standard errors`;

/** The groups of the table; a relation from the one-step form stands apart when the model itself has another. */
export function estimateGroups(
	estimates: Estimates,
	{ specification }: Pick<RunResult, 'specification'>
): readonly EstimateGroup[] {
	const decimals = estimateDecimals(estimates);
	const { equation, longRun, longRunOneStep, estimator, speed } = estimates;
	const of = (terms: readonly TermEstimate[]): EstimateRow[] => terms.map((term) => termRow(term, decimals));
	const apart = estimator !== 'one-step' && longRunOneStep !== null;
	return [
		{ title: 'Long run', how: howLongRun[estimator], rows: of(longRun) },
		...(apart
			? [
					{
						title: 'Long run, one-step form',
						how: 'what the declared signs and ranges are held against; standard errors by the delta method',
						rows: of(longRunOneStep)
					}
				]
			: []),
		{
			title: 'Adjustment',
			how: speedSentence(estimates, specification.frequency),
			rows: [row('speed of adjustment', speed, decimals), halfLifeRow(estimates, specification.frequency)]
		},
		{
			title: 'Equation',
			how: `for Δ${specification.dependent}, ${equation.firstPeriod} to ${equation.lastPeriod}, ${errorWords(estimates)}`,
			rows: of(equation.terms)
		}
	];
}

/** Decimals of the typeset equation: one digit of the smallest standard error, at most five. */
export const equationDecimals = (estimates: Estimates): number =>
	Math.min(5, decimalsFor(errorsOf(estimates), 1));
