import type { Check, CriticalValue, Part, Statistic } from '$lib/domain/run-result';
import { counted, pFigure, percent, significant } from './figures';
import { becauseWords, checkTitles, reasonWords } from './words';

/** Where the critical values of a check come from, in a word. */
const criticalSource: Readonly<Record<string, string>> = {
	'integration.adf': 'MacKinnon 2010',
	'integration.kpss': 'KPSS 1992, table 1',
	'cointegration.engle-granger': 'MacKinnon 2010',
	'cointegration.ecm-t': 'simulated surface',
	'adjustment.significance': 'MacKinnon 2010',
	'residual.stationarity-refit': 'MacKinnon 2010',
	'residual.stationarity-held': 'MacKinnon 2010',
	'stability.cusum': 'Brown, Durbin & Evans 1975',
	'stability.cusumsq': 'Edgerton & Wells 1994',
	'stability.sup-f': 'Hansen 1997'
};

/** What a test found, and what it did not find; never more than it can say. */
const readings: Readonly<Record<string, readonly [rejected: string, not: string]>> = {
	'cointegration.engle-granger': ['the null of no cointegration is rejected', 'cointegration is not shown'],
	'cointegration.ecm-t': [
		'the null of no relation in levels is rejected',
		'a relation in levels is not shown'
	],
	'cointegration.bounds': [
		'the null of no relation in levels is rejected',
		'a relation in levels is not shown'
	],
	'adjustment.significance': ['a speed of zero is rejected', 'a speed above zero is not shown'],
	'long-run.precision': ['every slope differs from zero', 'not every slope is shown to differ from zero'],
	'residual.stationarity-refit': [
		'the null of a unit root in the gap is rejected',
		'stationarity of the gap is not shown'
	],
	'residual.stationarity-held': [
		'the null of a unit root in the gap is rejected',
		'stationarity of the gap is not shown'
	],
	'residual.autocorrelation': ['autocorrelation was found', 'no autocorrelation was found'],
	'residual.portmanteau': ['autocorrelation was found', 'no autocorrelation was found'],
	'residual.arch': ['changing variance was found', 'no sign of changing variance was found'],
	'residual.heteroskedasticity': ['unequal variance was found', 'no sign of unequal variance was found'],
	'residual.normality': ['the residuals are not normal', 'no departure from normality was found'],
	'residual.functional-form': [
		'a departure from linearity was found',
		'no departure from linearity was found'
	],
	'stability.cusum': ['a sign of a break was found', 'no sign of a break was found'],
	'stability.cusumsq': ['a change of variance was found', 'no sign of a change of variance was found'],
	'stability.sup-f': ['a sign of a break was found', 'no sign of a break was found']
};

const symbols: Readonly<Record<string, string>> = {
	tau: 'τ',
	eta: 'η',
	lambda: 'λ',
	'speed-t': '|t| of the speed'
};

const statisticText = ({ name, value }: Statistic): string =>
	value === null
		? `${symbols[name] ?? name} is not defined`
		: `${symbols[name] ?? name} = ${significant(value)}`;

const criticalText = (id: string, values: readonly CriticalValue[] | undefined): string | undefined => {
	const value = values?.find(({ level }) => level === '5%') ?? values?.[0];
	if (!value) return undefined;
	const source = criticalSource[id];
	return `${value.level.replace('%', ' %')} critical value ${significant(value.value)}${source ? ` (${source})` : ''}`;
};

const pText = (of: Pick<Part, 'pValue' | 'pText'>): string | undefined =>
	of.pValue !== undefined ? pFigure(of.pValue) : of.pText !== undefined ? `p ${of.pText}` : undefined;

const capital = (text: string): string => text.charAt(0).toUpperCase() + text.slice(1);

const closed = (text: string): string => (/[.?!]$/.test(text) ? text : `${text}.`);

const joined = (...parts: readonly (string | undefined)[]): string =>
	parts.filter((part) => part !== undefined && part !== '').join(', ');

/** The bounds of the first part that has them. */
const boundsText = (check: Check): string | undefined => {
	const parameters = check.parts?.find((part) => part.parameters?.['boundI0'] !== undefined)?.parameters;
	if (!parameters) return undefined;
	const [low, high] = [Number(parameters['boundI0']), Number(parameters['boundI1'])];
	const table = check.parameters['table'];
	return `${String(parameters['level']).replace('%', ' %')} bounds ${significant(low)} and ${significant(high)}${table === undefined ? '' : ` (${String(table)})`}`;
};

const plain = (check: Check): string => {
	const reading = readings[check.id];
	const evidence = joined(
		check.statistic && statisticText(check.statistic),
		criticalText(check.id, check.criticalValues) ?? boundsText(check),
		pText(check),
		check.n === undefined ? undefined : `n = ${check.n}`
	);
	if (!reading || check.rejected === undefined) return evidence === '' ? '' : closed(evidence);
	return closed(`${evidence}: ${check.rejected ? reading[0] : reading[1]}`);
};

const figureOf = (check: Check, name: string): number | undefined => {
	const value = check.parameters[name];
	return typeof value === 'number' ? value : undefined;
};

const textOf = (check: Check, name: string): string => String(check.parameters[name] ?? '');

const namesWith = (check: Check, verdict: string): string[] =>
	(check.parts ?? []).filter((part) => part.verdict === verdict).map(({ about }) => about);

const listed = (names: readonly string[]): string =>
	names.length < 2 ? names.join('') : `${names.slice(0, -1).join(', ')} and ${names.at(-1)}`;

const orders = (check: Check): string =>
	closed(
		(check.parts ?? [])
			.map(({ about, parameters, detail }) =>
				parameters?.['order'] === undefined
					? `${about} could not be read${detail ? ` (${detail})` : ''}`
					: parameters['order'] === 'contradiction'
						? `for ${about} the tests contradict each other`
						: `${about} reads as ${String(parameters['order'])}`
			)
			.join('; ')
	);

/** Parts that were looked at one by one: which agree, which do not. */
const byDriver =
	(agree: string, query: string, against: string) =>
	(check: Check): string => {
		const clauses: [string, string[]][] = [
			[against, namesWith(check, 'fails')],
			[query, namesWith(check, 'query')],
			[agree, namesWith(check, 'holds')]
		];
		return clauses
			.filter(([, names]) => names.length > 0)
			.map(([words, names]) => closed(`${listed(names)}: ${words}`))
			.join(' ');
	};

const speed = (check: Check): string => {
	const lambda = check.statistic?.value ?? 0;
	const coefficient = significant(-lambda);
	if (lambda <= 0) return `The coefficient on the gap is ${coefficient}: a gap does not close.`;
	if (lambda < 1)
		return `The coefficient on the gap is ${coefficient}: ${percent(lambda)} of a gap closes in a period.`;
	const what = lambda < 2 ? 'overshoots and swings back' : 'grows with every swing';
	return `The coefficient on the gap is ${coefficient}: a gap ${what}.`;
};

const halfLife = (check: Check): string => {
	const value = check.statistic?.value ?? 0;
	const [low, high] = [figureOf(check, 'low'), figureOf(check, 'high')];
	const coverage = percent(figureOf(check, 'coverage') ?? 0.95);
	const interval =
		low === undefined
			? ''
			: high === undefined
				? `, ${coverage} interval from ${significant(low)} without end`
				: `, ${coverage} interval ${significant(low)} to ${significant(high)}`;
	const quarters = figureOf(check, 'quarters');
	const same = quarters === undefined || Math.abs(quarters - value) < 1e-9;
	return `Half of a shock is gone after ${significant(value)} periods${same ? '' : ` (${significant(quarters)} quarters)`}${interval}.`;
};

const integrity = (check: Check): string => {
	if (check.detail !== undefined) return closed(capital(check.detail));
	const constant = namesWith(check, 'fails');
	const straight = namesWith(check, 'query');
	return [
		`${counted(figureOf(check, 'periods') ?? 0, 'period')} from ${textOf(check, 'from')} to ${textOf(check, 'to')}, none missing.`,
		...(constant.length > 0 ? [`${listed(constant)} does not vary.`] : []),
		...(straight.length > 0
			? [`${listed(straight)} changes by the same amount many times running: filled in by a straight line?`]
			: [])
	].join(' ');
};

const replication = (check: Check): string => {
	const claimed = figureOf(check, 'claimed') ?? 0;
	const apart = figureOf(check, 'apart') ?? 0;
	if (claimed === 1)
		return `The one claimed figure ${apart === 0 ? 'comes' : 'does not come'} out to the digits claimed.`;
	return apart === 0
		? `All ${counted(claimed, 'claimed figure')} come out to the digits claimed.`
		: `${apart} of ${counted(claimed, 'claimed figure')} ${apart === 1 ? 'does' : 'do'} not come out to the digits claimed.`;
};

const family = (check: Check): string => {
	const judged = figureOf(check, 'judged') ?? 0;
	return (
		`Among ${counted(judged, 'check')} judged at their level, chance explains ${significant(figureOf(check, 'expected') ?? 0)} alarms; ` +
		`${figureOf(check, 'alarms') ?? 0} rang. Were they independent, at least one would ring in ${percent(figureOf(check, 'atLeastOne') ?? 0)} of sound models.`
	);
};

const series = (check: Check): string => {
	const made = (check.parts ?? []).filter(({ statistic }) => statistic !== undefined).length;
	return `${counted(made, 'statistic')} shown; the joint reading of each series judges.`;
};

const special: Readonly<Record<string, (check: Check) => string>> = {
	'data.integrity': integrity,
	'integration.adf': series,
	'integration.kpss': series,
	'integration.order': orders,
	'adjustment.sign': speed,
	'adjustment.half-life': halfLife,
	'long-run.signs': byDriver(
		'the sign is the declared one',
		'the sign is the opposite of the declared one, within its error',
		'the sign is the opposite of the declared one'
	),
	'long-run.range': byDriver(
		'the slope and its interval lie in the declared range',
		'the interval reaches over a limit of the declared range',
		'the slope and its interval lie outside the declared range'
	),
	'replication.coefficients': replication,
	'design.degrees': (check) =>
		`${check.n} rows for ${counted(figureOf(check, 'k') ?? 0, 'coefficient')}: ${significant(check.statistic?.value ?? 0)} each.`,
	'design.collinearity': (check) => {
		const inflated = namesWith(check, 'query');
		const limit = significant(figureOf(check, 'limit') ?? 0);
		const condition = `Condition number ${significant(check.statistic?.value ?? 0)}, limit ${limit}.`;
		return inflated.length > 0
			? `${condition} Variance inflation above its limit: ${listed(inflated)}.`
			: condition;
	},
	'family.false-alarms': family
};

/** An override is shown beside what the policy's own settings give. */
const byDefaultText = ({ byDefault }: Check): string => {
	if (!byDefault) return '';
	const { verdict, statistic } = byDefault;
	const value = statistic === null ? '' : `, statistic ${significant(statistic)}`;
	return `Under the policy’s own settings: ${verdict ?? 'shown only'}${value}.`;
};

/** The sentence of a check, computed from its figures: statistic, critical value and its source, n, reading. */
export const checkSentence = (check: Check): string => {
	if (check.verdict === 'not assessable') {
		const why = check.detail ?? (check.reason ? reasonWords[check.reason] : 'the check could not be made');
		return `Not assessable: ${closed(why)}`;
	}
	const reading = (special[check.id] ?? plain)(check);
	const rules = (check.because ?? []).flatMap((code) => becauseWords[code] ?? []);
	return [reading, ...rules, byDefaultText(check)].filter((text) => text !== '').join(' ');
};

/** The sentence of one part of a check. */
export const partSentence = (id: string, part: Part): string => {
	if (part.reason !== undefined) return `Not assessable: ${closed(part.detail ?? reasonWords[part.reason])}`;
	const evidence = joined(
		part.statistic && statisticText(part.statistic),
		criticalText(id, part.criticalValues),
		pText(part),
		part.n === undefined ? undefined : `n = ${part.n}`
	);
	return evidence === '' ? '' : closed(evidence);
};

/** The title of a check; an unknown id stands for itself. */
export const checkTitle = (id: string): string => checkTitles[id] ?? id;
