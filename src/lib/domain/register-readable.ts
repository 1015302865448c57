import { stepsText } from './register-steps';
import { termName } from './register-term-names';
import { termsOf } from './specification-terms';
import type { Specification } from './specification';

const minus = (text: string): string => text.replace(/^-/, '\u2212');
const number = (value: number): string => minus(String(value));
const yes = (value: boolean): string => (value ? 'yes' : 'no');
const lags = (all: readonly number[]): string => (all.length ? all.join(', ') : 'none');

type Words = Readonly<Record<string, string>>;

const seriesWords = (spec: Specification): Words =>
	Object.fromEntries(
		spec.series.flatMap(({ name, column, unit, transform }) => [
			[`series ${name}, column`, column],
			[`series ${name}, unit`, unit || 'none'],
			[`series ${name}, transforms`, stepsText(transform) || 'level']
		])
	);

const longRunWords = ({ longRun }: Specification): Words => ({
	...Object.fromEntries(
		longRun.drivers.flatMap(({ series, sign, plausible: [low, high], rationale }) => [
			[`long run, ${series}, sign`, minus(sign)],
			[`long run, ${series}, plausible range`, `${number(low)} to ${number(high)}`],
			[`long run, ${series}, rationale`, rationale]
		])
	),
	'long run, constant': yes(longRun.constant),
	'long run, trend': yes(longRun.trend)
});

const shortRunWords = ({ shortRun, dependent }: Specification): Words => ({
	[`short run, lags of Δ${dependent}`]: lags(shortRun.own),
	...Object.fromEntries(
		shortRun.drivers.flatMap(({ series, lags: all, sign }) => [
			[`short run, lags of Δ${series}`, lags(all)],
			[`short run, sign of Δ${series}`, minus(sign)]
		])
	),
	'short run, constant': yes(shortRun.constant)
});

const dummyWords = ({ dummies }: Specification): Words =>
	Object.fromEntries(
		dummies.flatMap(({ name, kind, from, to, in: place, reason }) => [
			[
				`dummy ${name}`,
				[
					kind,
					from && `from ${from}`,
					to && `to ${to}`,
					place === 'both' ? 'in both runs' : `in the ${place} run`
				]
					.filter(Boolean)
					.join(' ')
			],
			[`dummy ${name}, reason`, reason]
		])
	);

const estimationWords = ({ estimator, standardErrors, sample }: Specification): Words => ({
	'sample from': sample.from,
	'sample to': sample.to,
	estimator: estimator.kind,
	...(estimator.leads !== undefined && { 'estimator, leads': String(estimator.leads) }),
	...(estimator.imposed && {
		'imposed constant': number(estimator.imposed.constant),
		...(estimator.imposed.trend !== undefined && { 'imposed trend': number(estimator.imposed.trend) }),
		...Object.fromEntries(
			estimator.imposed.slopes.map(({ series, value }) => [`imposed slope of ${series}`, number(value)])
		)
	}),
	'standard errors': standardErrors
});

const givenWords = (spec: Specification): Words => {
	const names = new Map(termsOf(spec).map((term) => [term.code, termName(term)]));
	const name = (code: string): string => names.get(code) ?? code;
	const { claimed, fixed } = spec;
	return {
		...Object.fromEntries(
			fixed.flatMap(({ term, value, reason }) => [
				[`fixed, ${name(term)}`, number(value)],
				[`fixed, ${name(term)}, reason`, reason]
			])
		),
		...(claimed && {
			'claimed, source': claimed.source,
			...Object.fromEntries(
				claimed.coefficients.map(({ term, value, se }) => [
					`claimed, ${name(term)}`,
					`${minus(value)}${se === undefined ? '' : ` (${se})`}`
				])
			),
			...(claimed.covariance && { 'claimed, covariance of': claimed.covariance.terms.map(name).join(', ') }),
			...(claimed.residuals && {
				'claimed, residuals': `${claimed.residuals.values.length} from ${claimed.residuals.from}`
			})
		})
	};
};

/**
 * A specification field by field in the words of its readers, for comparison: terms typeset, transforms as typed,
 * claimed digits as claimed.
 */
export const readableSpecification = (spec: Specification): Words => ({
	frequency: spec.frequency,
	'dependent variable': spec.dependent,
	...seriesWords(spec),
	...longRunWords(spec),
	...shortRunWords(spec),
	...dummyWords(spec),
	...estimationWords(spec),
	...givenWords(spec)
});

/** Fields that say which periods are used, apart from the rest of a specification. */
export const sampleFields: readonly string[] = ['sample from', 'sample to'];
