import { periodsPerYear } from './period';
import type { Specification } from './specification';

/**
 * One coefficient of the equation. `code` is internal and never shown; screens typeset from the other parts.
 *
 * - `long` terms (`long.const`, `long.trend`, `long.<series>`) are the relation in the gap.
 * - `short` terms are the regressors of the equation for the difference of the dependent variable: `const`, `trend`,
 *   dummies, `ec.l1` (the gap; its coefficient is minus the speed), `<series>.l1` (levels of the one-step form),
 *   `d.<series>.l<k>`. The dependent variable is written `y`.
 */
export interface SpecificationTerm {
	readonly code: string;
	readonly part: 'long' | 'short';
	readonly kind: 'constant' | 'trend' | 'gap' | 'level' | 'difference' | 'dummy';
	/** Name of the series or dummy as specified; absent for constant, trend and gap. */
	readonly series?: string;
	readonly lag: number;
	readonly difference: boolean;
}

const term = (
	part: 'long' | 'short',
	kind: SpecificationTerm['kind'],
	code: string,
	series?: string,
	lag = 0
): SpecificationTerm =>
	Object.freeze({
		code,
		part,
		kind,
		lag,
		difference: kind === 'difference',
		...(series !== undefined && { series })
	});

/** Names of the dummy columns of a part; a seasonal pattern is one column a period of the year but the last, its base. */
const dummyNames = (spec: Specification, part: 'long' | 'short'): string[] =>
	spec.dummies
		.filter((dummy) => dummy.in === 'both' || dummy.in === part)
		.flatMap((dummy) =>
			dummy.kind === 'seasonal'
				? Array.from({ length: periodsPerYear[spec.frequency] - 1 }, (_, i) => `${dummy.name}${i + 1}`)
				: [dummy.name]
		);

/**
 * Whether the equation has free levels of its variables rather than a gap made beforehand. Coefficients from
 * elsewhere may be given in either form: a claimed lagged level of the dependent variable tells which.
 */
export const levelsAreFree = (spec: Specification): boolean =>
	spec.estimator.kind === 'one-step' ||
	(spec.estimator.kind === 'elsewhere' &&
		(spec.claimed?.coefficients.some(({ term }) => term === 'y.l1') ?? false));

/** The terms of the relation in the gap. */
export const longRunTerms = (spec: Specification): readonly SpecificationTerm[] => [
	...(spec.longRun.constant ? [term('long', 'constant', 'long.const')] : []),
	...(spec.longRun.trend ? [term('long', 'trend', 'long.trend')] : []),
	...spec.longRun.drivers.map(({ series }) => term('long', 'level', `long.${series}`, series)),
	...dummyNames(spec, 'long').map((name) => term('long', 'dummy', `long.${name}`, name))
];

/** Levels one period back, or the gap. */
const relationTerms = (spec: Specification): SpecificationTerm[] =>
	levelsAreFree(spec)
		? [
				term('short', 'level', 'y.l1', spec.dependent, 1),
				...spec.longRun.drivers.map(({ series }) => term('short', 'level', `${series}.l1`, series, 1)),
				...dummyNames(spec, 'long').map((name) => term('short', 'dummy', `${name}.l1`, name, 1))
			]
		: [term('short', 'gap', 'ec.l1', undefined, 1)];

/** The regressors of the equation for the difference of the dependent variable, in their fixed order. */
export const equationTerms = (spec: Specification): readonly SpecificationTerm[] => {
	const free = levelsAreFree(spec);
	const { longRun, shortRun } = spec;
	const rising = (lags: readonly number[]): number[] => [...lags].sort((a, b) => a - b);
	return [
		...((free && longRun.constant) || shortRun.constant ? [term('short', 'constant', 'const')] : []),
		...(free && longRun.trend ? [term('short', 'trend', 'trend')] : []),
		...dummyNames(spec, 'short').map((name) => term('short', 'dummy', name, name)),
		...relationTerms(spec),
		...rising(shortRun.own).map((lag) => term('short', 'difference', `d.y.l${lag}`, spec.dependent, lag)),
		...shortRun.drivers.flatMap(({ series, lags }) =>
			rising(lags).map((lag) => term('short', 'difference', `d.${series}.l${lag}`, series, lag))
		)
	];
};

/**
 * Every term a coefficient can be claimed for: the relation first, then the equation. In the one-step form the
 * long-run terms are functions of the equation's own: claimed slopes can be replicated, not fixed.
 */
export const termsOf = (spec: Specification): readonly SpecificationTerm[] => [
	...longRunTerms(spec),
	...equationTerms(spec),
	// People claim the coefficient on the gap for the one-step form too: it is that of the lagged level.
	...(levelsAreFree(spec) ? [term('short', 'gap', 'ec.l1', undefined, 1)] : [])
];
