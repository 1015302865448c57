import { isRefusal, type Refusal } from '$lib/econometrics/refusal';
import { difference } from '$lib/econometrics/series/lags';
import { adfAuto, defaultMaxLag, type AdfAuto, type LagRule } from '$lib/econometrics/unit-root/adf-auto';
import { kpss, type Kpss, type KpssLag } from '$lib/econometrics/unit-root/kpss';
import { orderOfIntegration, type Order } from '$lib/econometrics/unit-root/order-of-integration';
import { linePath } from '$lib/domain/policy';
import type { Verdict } from '$lib/domain/run';
import type { Check, Part } from '$lib/domain/run-result';
import { checkOf, refusedCheck, refusedPart, tooFew, type AnyCheck, type Context } from '../context';
import { sources } from '../sources';
import { worst } from '../verdict';

type Det = 'c' | 'ct';
type Form = 'level' | 'difference';

interface Tested {
	readonly series: string;
	readonly form: Form;
	readonly values: Float64Array;
}

/** Each series of the relation and of the short run, in level and first difference. */
const tested = (context: Context): readonly Tested[] | Refusal => {
	if (isRefusal(context.sample)) return context.sample;
	const { spec } = context;
	const { series } = context.sample.sample;
	const names = new Set([
		spec.dependent,
		...spec.longRun.drivers.map((driver) => driver.series),
		...spec.shortRun.drivers.map((driver) => driver.series)
	]);
	return [...names].flatMap((name) => {
		const values = series.get(name)!;
		return [
			{ series: name, form: 'level' as const, values },
			{ series: name, form: 'difference' as const, values: difference(values) }
		];
	});
};

/** A difference needs no trend: it is tested around a constant. */
const detOf = (context: Context, id: string, form: Form): Det =>
	form === 'difference' ? 'c' : (context.settings.text(linePath(id, 'deterministic')) as Det);

const adfOf = (context: Context, { values, form }: Tested): AdfAuto | Refusal => {
	const id = 'integration.adf';
	const few = tooFew(values.length, leastFor(context, id, form), 'periods');
	if (few) return few;
	const cap = context.settings.number(linePath(id, `cap-${context.spec.frequency}`));
	return adfAuto(values, {
		det: detOf(context, id, form),
		rule: context.settings.text(linePath(id, 'rule')) as LagRule,
		maxLag: defaultMaxLag(values.length, cap)
	});
};

const kpssOf = (context: Context, { values, form }: Tested, lag: string): Kpss | Refusal => {
	const id = 'integration.kpss';
	return (
		tooFew(values.length, leastFor(context, id, form), 'periods') ??
		kpss(values, { det: detOf(context, id, form), lag: lag as KpssLag })
	);
};

/** The least length counts periods of the level; its difference has one fewer. */
const leastFor = (context: Context, id: string, form: Form): number =>
	context.settings.number(linePath(id, 'least')) - (form === 'difference' ? 1 : 0);

/** A check that is shown only: the joint reading judges. It is not assessable where no part could be made. */
const shownOnly = (
	id: string,
	parts: readonly Part[],
	nullHypothesis: string,
	lines: readonly string[]
): Check => {
	const refused = parts.every((part) => part.reason !== undefined) ? parts[0] : undefined;
	return checkOf(id, {
		verdict: refused ? 'not assessable' : null,
		...(refused?.reason !== undefined && { reason: refused.reason }),
		...(refused?.detail !== undefined && { detail: refused.detail }),
		nullHypothesis,
		source: sources[id]!,
		parts,
		lines
	});
};

/** Augmented Dickey-Fuller test of each series, in level and difference. */
export const integrationAdf: AnyCheck = (context) => {
	const id = 'integration.adf';
	const series = tested(context);
	if (isRefusal(series)) return refusedCheck(id, series, { source: sources[id]! });
	const parts = series.map((one): Part => {
		const test = adfOf(context, one);
		if (isRefusal(test)) return { ...refusedPart(one.series, test), parameters: { form: one.form } };
		return Object.freeze({
			about: one.series,
			statistic: { name: 'tau', value: test.stat },
			parameters: {
				form: one.form,
				deterministic: test.det,
				lags: test.lags,
				rule: test.search.rule,
				maxLag: test.search.maxLag
			},
			pValue: test.pvalue,
			criticalValues: (['1%', '5%', '10%'] as const).map((level) => ({ level, value: test.critical[level] })),
			n: test.nobs
		});
	});
	return shownOnly(id, parts, 'unit-root', [
		'least',
		'deterministic',
		'rule',
		`cap-${context.spec.frequency}`
	]);
};

/** KPSS test of each series, in level and difference, for each truncation rule of the policy. */
export const integrationKpss: AnyCheck = (context) => {
	const id = 'integration.kpss';
	const series = tested(context);
	if (isRefusal(series)) return refusedCheck(id, series, { source: sources[id]! });
	const rules = context.settings.texts(linePath(id, 'lag'));
	const parts = series.flatMap((one) =>
		rules.map((rule): Part => {
			const test = kpssOf(context, one, rule);
			if (isRefusal(test)) return { ...refusedPart(one.series, test), parameters: { form: one.form, rule } };
			return Object.freeze({
				about: one.series,
				statistic: { name: 'eta', value: test.stat },
				parameters: { form: one.form, deterministic: test.det, lag: test.lag, rule },
				...(test.bracket === null ? { pValue: test.pvalue } : { pText: `${test.bracket} ${test.pvalue}` }),
				criticalValues: (['10%', '5%', '2.5%', '1%'] as const).map((level) => ({
					level,
					value: test.critical[level]
				})),
				n: test.nobs
			});
		})
	);
	return shownOnly(id, parts, 'stationary', ['least', 'deterministic', 'lag']);
};

const verdictOfOrder: Readonly<Record<Order, Verdict>> = {
	'I(0)': 'holds',
	'I(1)': 'holds',
	'I(2)': 'fails',
	contradiction: 'query'
};

type Level = '1%' | '5%' | '10%';

const formTests = (context: Context, one: Tested, level: Level) => {
	const unitRoot = adfOf(context, one);
	if (isRefusal(unitRoot)) return unitRoot;
	const stationarity = kpssOf(context, one, context.settings.texts(linePath('integration.kpss', 'lag'))[0]!);
	if (isRefusal(stationarity)) return stationarity;
	return {
		unitRoot: [{ test: 'adf' as const, stat: unitRoot.stat, critical: unitRoot.critical[level] }],
		stationarity: [{ test: 'kpss' as const, stat: stationarity.stat, critical: stationarity.critical[level] }]
	};
};

const orderPart = (context: Context, [level, change]: readonly [Tested, Tested], at: Level): Part => {
	const [first, second] = [formTests(context, level, at), formTests(context, change, at)];
	if (isRefusal(first)) return refusedPart(level.series, first);
	if (isRefusal(second)) return refusedPart(level.series, second);
	const reading = orderOfIntegration({ level: first, difference: second });
	if (isRefusal(reading)) return refusedPart(level.series, reading);
	return Object.freeze({
		about: level.series,
		parameters: {
			order: reading.order,
			levelUnitRoot: reading.level.unitRoot,
			levelStationarity: reading.level.stationarity,
			differenceUnitRoot: reading.difference.unitRoot,
			differenceStationarity: reading.difference.stationarity
		},
		verdict: verdictOfOrder[reading.order]
	});
};

/** Joint reading of the unit-root and stationarity tests of each series: the only verdict on its order. */
export const integrationOrder: AnyCheck = (context) => {
	const id = 'integration.order';
	const series = tested(context);
	if (isRefusal(series)) return refusedCheck(id, series, { source: sources[id]! });
	const at = context.settings.text(linePath(id, 'level')) as Level;
	const parts: Part[] = [];
	for (let i = 0; i + 1 < series.length; i += 2)
		parts.push(orderPart(context, [series[i]!, series[i + 1]!], at));
	// One series that could not be read leaves the order of the model's series open.
	const unread = parts.find(({ verdict }) => verdict === 'not assessable');
	const found = worst(parts.map(({ verdict }) => verdict!));
	const verdict = unread && found === 'holds' ? 'not assessable' : found;
	return checkOf(id, {
		verdict,
		...(verdict === 'not assessable' &&
			unread?.reason !== undefined && { reason: unread.reason, detail: `${unread.about}: ${unread.detail}` }),
		source: sources[id]!,
		parameters: { level: at },
		parts,
		lines: ['level']
	});
};
