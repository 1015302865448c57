import type { Issue } from './faults';
import type { Specification } from './specification';
import { equationTerms, levelsAreFree, longRunTerms } from './specification-terms';

const issue = (pointer: string, message: string): Issue => ({ pointer, message });

/** Items after the first of their kind. */
export const repeated = <T>(items: readonly T[]): number[] =>
	items.flatMap((item, index) => (items.indexOf(item) < index ? [index] : []));

/** Where nothing is estimated here, each coefficient must be given. */
const elsewhereIssues = (spec: Specification): Issue[] => {
	const given = new Set(spec.claimed?.coefficients.map(({ term }) => term) ?? []);
	const needed = [...(levelsAreFree(spec) ? [] : longRunTerms(spec)), ...equationTerms(spec)];
	return needed.flatMap(({ code, kind, series }) =>
		given.has(code)
			? []
			: [issue('/claimed/coefficients', `Give the coefficient of ${describe(kind, series)} (${code}).`)]
	);
};

const describe = (kind: string, series?: string): string =>
	series === undefined ? `the ${kind}` : `${series}`;

/** What the estimator needs and is not given. */
export const estimatorIssues = (spec: Specification): Issue[] => {
	const { kind, imposed } = spec.estimator;
	if (kind === 'dols' || kind === 'fm')
		return [
			issue(
				'/estimator/kind',
				'Dynamic and fully modified least squares are not offered yet; choose two-step or one-step.'
			)
		];
	if (kind === 'elsewhere') return elsewhereIssues(spec);
	if (kind !== 'imposed')
		return imposed ? [issue('/estimator/imposed', 'Imposed values need the estimator kind imposed.')] : [];
	if (!imposed)
		return [issue('/estimator/imposed', 'Give the constant and the slope of each driver that are imposed.')];
	return [
		...spec.longRun.drivers.flatMap(({ series }) =>
			imposed.slopes.some((slope) => slope.series === series)
				? []
				: [issue('/estimator/imposed/slopes', `Give the imposed slope of ${series}.`)]
		),
		...imposed.slopes.flatMap(({ series }, i) =>
			spec.longRun.drivers.some((driver) => driver.series === series)
				? []
				: [issue(`/estimator/imposed/slopes/${i}/series`, `${series} is not a driver of the long run.`)]
		),
		...repeated(imposed.slopes.map(({ series }) => series)).map((i) =>
			issue(`/estimator/imposed/slopes/${i}/series`, 'This slope is given twice; keep one.')
		),
		...(spec.longRun.trend && imposed.trend === undefined
			? [issue('/estimator/imposed/trend', 'The long run has a trend; give its imposed slope.')]
			: [])
	];
};
