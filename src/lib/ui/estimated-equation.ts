/** The typeset equation of a specification, with letters while it is typed and numbers once it is estimated. */
import type { Estimates, TermEstimate } from '$lib/domain/run-result';
import type { Specification } from '$lib/domain/specification';
import {
	equationTerms,
	levelsAreFree,
	longRunTerms,
	type SpecificationTerm
} from '$lib/domain/specification-terms';
import type { Coefficient, EquationTerm, EquationView, LongRunView } from './equation';

type CoefficientOf = (term: SpecificationTerm) => Coefficient;

function longRunView(terms: readonly SpecificationTerm[], of: CoefficientOf): LongRunView {
	const constant = terms.find(({ kind }) => kind === 'constant');
	const trend = terms.find(({ kind }) => kind === 'trend');
	const drivers = terms.filter(({ kind }) => kind === 'level' || kind === 'dummy');
	return {
		...(constant && { constant: of(constant) }),
		...(trend && { trend: of(trend) }),
		terms: drivers.map((term) => ({ series: term.series ?? '', coefficient: of(term) }))
	};
}

/** What of the equation stands outside the gap: its own constant, dummies and differences. */
function isShortRun(spec: Specification, { kind, lag }: SpecificationTerm): boolean {
	if (kind === 'constant') return spec.shortRun.constant;
	// Dummies of the relation come one period back, as its levels do.
	return kind === 'difference' || (kind === 'dummy' && lag === 0);
}

function shortRunView(
	spec: Specification,
	terms: readonly SpecificationTerm[],
	of: CoefficientOf
): Pick<EquationView, 'constant' | 'shortRun'> {
	const own = terms.filter((term) => isShortRun(spec, term));
	const constant = own.find(({ kind }) => kind === 'constant');
	const shortRun = own
		.filter(({ kind }) => kind !== 'constant')
		.map((term): EquationTerm => ({
			series: term.series ?? '',
			lag: term.lag,
			kind: term.kind === 'dummy' ? 'dummy' : 'difference',
			coefficient: of(term)
		}));
	return { ...(constant && { constant: of(constant) }), shortRun };
}

/** Differences before dummies: people read the drivers first. */
function driversFirst(view: EquationView): EquationView {
	const rank = ({ kind }: EquationTerm): number => (kind === 'dummy' ? 1 : 0);
	return { ...view, shortRun: [...view.shortRun].sort((a, b) => rank(a) - rank(b)) };
}

/** The coefficient that a specification imposes on a term; none of the others has a value yet. */
function imposedCoefficient(
	spec: Specification,
	{ code, kind, series, part }: SpecificationTerm
): Coefficient {
	const fixed = spec.fixed.find(({ term }) => term === code)?.value;
	if (fixed !== undefined) return { value: fixed, fixed: true };
	const imposed = part === 'long' ? spec.estimator.imposed : undefined;
	if (!imposed) return {};
	const slope = imposed.slopes.find((given) => given.series === series)?.value;
	const value = kind === 'constant' ? imposed.constant : kind === 'trend' ? imposed.trend : slope;
	return value === undefined ? {} : { value, fixed: true };
}

/** The equation of a specification before anything is estimated; works on one that is still being typed. */
export function equationOfSpecification(spec: Specification): EquationView {
	const of: CoefficientOf = (term) => imposedCoefficient(spec, term);
	const gap = equationTerms(spec).find(({ kind }) => kind === 'gap');
	const related = spec.longRun.drivers.length > 0;
	return driversFirst({
		dependent: spec.dependent,
		...shortRunView(spec, equationTerms(spec), of),
		...(related && { speed: gap ? of(gap) : {}, longRun: longRunView(longRunTerms(spec), of) })
	});
}

function estimatedCoefficient({ value, se, fixed }: TermEstimate): Coefficient {
	return { value, ...(se !== null && !fixed && { se }), ...(fixed && { fixed }) };
}

/** The equation with its estimates; the one-step form is shown with its gap, errors of the long run by the delta method. */
export function equationOfEstimates(spec: Specification, estimates: Estimates): EquationView {
	const all = [...estimates.longRun, ...estimates.equation.terms];
	const of: CoefficientOf = ({ code }) => {
		const found = all.find(({ term }) => term.code === code);
		return found ? estimatedCoefficient(found) : {};
	};
	const { value, se } = estimates.speed;
	const gap = estimates.equation.terms.find(({ term }) => term.kind === 'gap');
	return driversFirst({
		dependent: spec.dependent,
		...shortRunView(
			spec,
			estimates.equation.terms.map(({ term }) => term),
			of
		),
		speed:
			!levelsAreFree(spec) && gap ? estimatedCoefficient(gap) : { value: -value, ...(se !== null && { se }) },
		longRun: longRunView(
			estimates.longRun.map(({ term }) => term),
			of
		)
	});
}
