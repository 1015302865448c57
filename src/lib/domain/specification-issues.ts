import { Invalid, type Issue } from './faults';
import { periodExample, periodIndex } from './period';
import { specificationSchema, type Specification } from './specification';
import { estimatorIssues, repeated } from './specification-estimator';
import { equationTerms, termsOf } from './specification-terms';

const issue = (pointer: string, message: string): Issue => ({ pointer, message });

/** Names that stand for parts of every equation. */
const reserved = new Set(['const', 'trend', 'ec', 'long', 'variance']);

const nameIssues = (spec: Specification): Issue[] => {
	const names = [...spec.series.map(({ name }) => name), ...spec.dummies.map(({ name }) => name)];
	const pointerOf = (index: number): string =>
		index < spec.series.length ? `/series/${index}/name` : `/dummies/${index - spec.series.length}/name`;
	return [
		...repeated(names).map((index) =>
			issue(pointerOf(index), `The name ${names[index]} is used twice; give each series and dummy its own.`)
		),
		...names.flatMap((name, index) =>
			reserved.has(name)
				? [issue(pointerOf(index), `${name} stands for a part of every equation; choose another name.`)]
				: []
		),
		// Lagged terms of the dependent variable are coded y, so only the dependent variable may be called so.
		...names.flatMap((name, index) =>
			name === 'y' && spec.dependent !== 'y'
				? [issue(pointerOf(index), 'Only the dependent variable may be called y.')]
				: []
		)
	];
};

const unknown = (spec: Specification, pointer: string, name: string): Issue[] =>
	spec.series.some((series) => series.name === name)
		? []
		: [
				issue(
					pointer,
					`There is no series named ${name}; the series are ${spec.series.map((s) => s.name).join(', ')}.`
				)
			];

const driverIssues = (spec: Specification): Issue[] => {
	const long = spec.longRun.drivers;
	const short = spec.shortRun.drivers;
	const dependent = (pointer: string, name: string): Issue[] =>
		name === spec.dependent
			? [issue(pointer, `${name} is the dependent variable and cannot drive itself.`)]
			: [];
	return [
		...unknown(spec, '/dependent', spec.dependent),
		...long.flatMap(({ series, plausible }, i) => [
			...unknown(spec, `/longRun/drivers/${i}/series`, series),
			...dependent(`/longRun/drivers/${i}/series`, series),
			...(plausible[0] > plausible[1]
				? [
						issue(
							`/longRun/drivers/${i}/plausible`,
							'The range ends below its beginning; exchange the two numbers.'
						)
					]
				: [])
		]),
		...repeated(long.map(({ series }) => series)).map((i) =>
			issue(`/longRun/drivers/${i}/series`, `${long[i]!.series} stands in the long run twice; keep one.`)
		),
		...short.flatMap(({ series, lags }, i) => [
			...unknown(spec, `/shortRun/drivers/${i}/series`, series),
			...dependent(`/shortRun/drivers/${i}/series`, series),
			...(lags.length === 0
				? [
						issue(
							`/shortRun/drivers/${i}/lags`,
							`Name at least one lag of ${series}, or remove it from the short run.`
						)
					]
				: []),
			...repeated(lags).map((j) =>
				issue(`/shortRun/drivers/${i}/lags/${j}`, `Lag ${lags[j]} of ${series} is listed twice; keep one.`)
			)
		]),
		...repeated(short.map(({ series }) => series)).map((i) =>
			issue(
				`/shortRun/drivers/${i}/series`,
				`${short[i]!.series} is listed twice; put all its lags in one line.`
			)
		),
		...repeated(spec.shortRun.own).map((j) =>
			issue(`/shortRun/own/${j}`, `Own lag ${spec.shortRun.own[j]} is listed twice; keep one.`)
		)
	];
};

const periodIssue = (spec: Specification, pointer: string, text: string): Issue[] =>
	periodIndex(text, spec.frequency) === undefined
		? [
				issue(
					pointer,
					`${text} is not a period of ${spec.frequency} data; write it as ${periodExample[spec.frequency]}.`
				)
			]
		: [];

const reversed = (spec: Specification, from: string, to: string): boolean =>
	(periodIndex(from, spec.frequency) ?? -Infinity) > (periodIndex(to, spec.frequency) ?? Infinity);

const sampleIssues = (spec: Specification): Issue[] => [
	...periodIssue(spec, '/sample/from', spec.sample.from),
	...periodIssue(spec, '/sample/to', spec.sample.to),
	...(reversed(spec, spec.sample.from, spec.sample.to)
		? [
				issue(
					'/sample/to',
					`The sample ends before it begins (${spec.sample.from}); exchange the two periods.`
				)
			]
		: [])
];

const dummyIssues = (spec: Specification): Issue[] =>
	spec.dummies.flatMap((dummy, i) => {
		const at = `/dummies/${i}`;
		const seasonal = dummy.kind === 'seasonal';
		return [
			...(seasonal && spec.frequency === 'annual'
				? [issue(`${at}/kind`, 'Annual data have no seasons; remove the seasonal dummies.')]
				: []),
			...(!seasonal && dummy.from === undefined
				? [issue(`${at}/from`, `Say from which period ${dummy.name} is 1.`)]
				: []),
			...(dummy.from === undefined ? [] : periodIssue(spec, `${at}/from`, dummy.from)),
			...(dummy.to === undefined ? [] : periodIssue(spec, `${at}/to`, dummy.to)),
			...(dummy.from !== undefined && dummy.to !== undefined && reversed(spec, dummy.from, dummy.to)
				? [issue(`${at}/to`, `${dummy.name} ends before it begins; exchange the two periods.`)]
				: [])
		];
	});

const termIssues = (spec: Specification): Issue[] => {
	const fixable = new Set(equationTerms(spec).map(({ code }) => code));
	const claimable = new Set(termsOf(spec).map(({ code }) => code));
	const claims = spec.claimed?.coefficients ?? [];
	return [
		...spec.fixed.flatMap(({ term }, i) =>
			fixable.has(term)
				? []
				: [issue(`/fixed/${i}/term`, 'This term is not in the equation; add it, or remove the fixed value.')]
		),
		...repeated(spec.fixed.map(({ term }) => term)).map((i) =>
			issue(`/fixed/${i}/term`, 'This term is fixed twice; keep one value.')
		),
		...claims.flatMap(({ term }, i) =>
			claimable.has(term)
				? []
				: [issue(`/claimed/coefficients/${i}/term`, `${term} is not a term of this equation.`)]
		),
		...repeated(claims.map(({ term }) => term)).map((i) =>
			issue(`/claimed/coefficients/${i}/term`, 'This coefficient is claimed twice; keep one.')
		)
	];
};

const relationIssues = (spec: Specification): Issue[] => [
	...(spec.longRun.drivers.length === 0
		? [issue('/longRun/drivers', 'An error-correction model needs at least one driver in the long run.')]
		: []),
	...(spec.longRun.trend && !spec.longRun.constant
		? [
				issue(
					'/longRun/constant',
					'A trend without a constant passes through zero at the first period; keep the constant.'
				)
			]
		: []),
	...(spec.estimator.kind === 'one-step' && spec.longRun.constant && spec.shortRun.constant
		? [
				issue(
					'/shortRun/constant',
					'The one-step equation has one constant; leave it to the long run, or to the short run, not both.'
				)
			]
		: [])
];

/** What the shape of a specification cannot say: names, lags, periods and values that do not fit together. */
export const structuralIssues = (spec: Specification): readonly Issue[] => [
	...nameIssues(spec),
	...driverIssues(spec),
	...relationIssues(spec),
	...sampleIssues(spec),
	...dummyIssues(spec),
	...estimatorIssues(spec),
	...termIssues(spec)
];

/** The specification in a JSON value, or `Invalid` with a pointer and a mending sentence per field. */
export const parseSpecification = (json: unknown): Specification => {
	const parsed = specificationSchema.safeParse(json);
	if (!parsed.success)
		throw new Invalid(
			parsed.error.issues.map(({ path, message }) =>
				issue(path.map((key) => `/${String(key)}`).join(''), message)
			)
		);
	const issues = structuralIssues(parsed.data);
	if (issues.length > 0) throw new Invalid(issues);
	return parsed.data;
};
