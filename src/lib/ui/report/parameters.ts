/** The parameters of a check in words. */
import type { Parameter } from '$lib/domain/run-result';
import { formatP } from '../format';
import { reading, typed } from './figures';

const names: Readonly<Record<string, string>> = {
	f: 'F',
	fP: 'p of F',
	lm: 'LM',
	lmP: 'p of LM',
	se: 's.e.',
	df: 'degrees of freedom',
	df1: 'numerator degrees of freedom',
	df2: 'denominator degrees of freedom',
	k: 'coefficients',
	boundI0: 'bound, all I(0)',
	boundI1: 'bound, all I(1)',
	pIfI0: 'p, all I(0)',
	pIfI1: 'p, all I(1)',
	effectiveRows: 'rows the critical value is for',
	recursiveResiduals: 'recursive residuals',
	crossesAt5: 'crosses its 5 % boundary',
	breakFrom: 'largest for a break from',
	coefficientOnGap: 'coefficient on the gap',
	conditionOfEquation: 'condition number of the equation',
	vifLimit: 'limit of variance inflation',
	atLeastOne: 'chance of at least one'
};

const deterministic: Readonly<Record<string, string>> = {
	n: 'none',
	c: 'constant',
	ct: 'constant and trend'
};

/** `tableVariables` is `table variables`. */
const nameOf = (key: string): string =>
	names[key] ?? key.replace(/[A-Z]/g, (letter) => ` ${letter.toLowerCase()}`);

/** Codes as words: `bootstrap-iid` is `bootstrap iid`; names and periods stay as they are. */
export const codeWords = (code: string): string => code.replaceAll(/(?<=[a-z])-(?=[a-z])/g, ' ');

function textWords(key: string, value: string): string {
	if (key === 'declared') return typed(value);
	if (/deterministic$/i.test(key)) return deterministic[value] ?? value;
	return codeWords(value).replace(/(?<=\d)%$/, ' %');
}

const pValues = new Set(['fP', 'lmP', 'pIfI0', 'pIfI1']);

function valueWords(key: string, value: Parameter): string {
	if (typeof value === 'number') return pValues.has(key) ? formatP(value) : reading(value);
	if (typeof value === 'boolean') return value ? 'yes' : 'no';
	if (typeof value === 'string') return textWords(key, value);
	return value.map((each) => (typeof each === 'number' ? reading(each) : each)).join(', ');
}

/** Two parameters that are the ends of one interval. */
const intervals: readonly (readonly [low: string, high: string, name: string])[] = [
	['from', 'to', 'interval'],
	['low', 'high', 'interval'],
	['fiellerLow', 'fiellerHigh', 'Fieller interval']
];

/** Pulls both ends of an interval of numbers into one phrase. */
function intervalWords(left: Map<string, Parameter>): string[] {
	return intervals.flatMap(([low, high, name]) => {
		const [from, to] = [left.get(low), left.get(high)];
		if (typeof from !== 'number') return [];
		left.delete(low);
		left.delete(high);
		return [`${name} ${reading(from)} to ${typeof to === 'number' ? reading(to) : 'without end'}`];
	});
}

/** `lags 2`, `rule AIC`: every parameter that is not said elsewhere, in the order of the result. */
export function parameterWords(
	parameters: Readonly<Record<string, Parameter>> | undefined,
	said: readonly string[] = []
): readonly string[] {
	const left = new Map(Object.entries(parameters ?? {}).filter(([key]) => !said.includes(key)));
	const spans = intervalWords(left);
	return [...spans, ...[...left].map(([key, value]) => `${nameOf(key)} ${valueWords(key, value)}`)];
}
