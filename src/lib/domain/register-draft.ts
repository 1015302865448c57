import type { Specification } from './specification';
import { stepsText } from './register-steps';

/** A specification as it stands in a form: everything as typed, nothing judged. */
export interface SpecificationDraft {
	readonly frequency: string;
	readonly dependent: string;
	readonly from: string;
	readonly to: string;
	readonly estimator: string;
	readonly standardErrors: string;
	readonly longConstant: boolean;
	readonly longTrend: boolean;
	readonly shortConstant: boolean;
	/** Lags of the dependent variable's own differences: `1, 2`. */
	readonly own: string;
	readonly imposedConstant: string;
	readonly imposedTrend: string;
	readonly series: readonly Row<'name' | 'column' | 'unit' | 'transform'>[];
	/** Signs and ranges are those declared; only an imposed slope is typed here. */
	readonly long: readonly Row<'series' | 'slope'>[];
	readonly short: readonly Row<'series' | 'lags' | 'sign'>[];
	readonly dummies: readonly Row<'name' | 'kind' | 'from' | 'to' | 'in' | 'reason'>[];
	readonly fixed: readonly Row<'term' | 'value' | 'reason'>[];
	readonly claimedSource: string;
	/** The pasted table of claimed coefficients. */
	readonly claims: string;
	/** Why the model gets this version. */
	readonly reason: string;
}

type Row<K extends string> = Readonly<Record<K, string>>;

/** The lists of the form and the columns of their rows. */
export const draftLists = {
	series: ['name', 'column', 'unit', 'transform'],
	long: ['series', 'slope'],
	short: ['series', 'lags', 'sign'],
	dummies: ['name', 'kind', 'from', 'to', 'in', 'reason'],
	fixed: ['term', 'value', 'reason']
} as const;
export type DraftList = keyof typeof draftLists;

const fields = [
	'frequency',
	'dependent',
	'from',
	'to',
	'estimator',
	'standardErrors',
	'own',
	'imposedConstant',
	'imposedTrend',
	'claimedSource',
	'claims',
	'reason'
] as const;
const ticks = ['longConstant', 'longTrend', 'shortConstant'] as const;

/** Rows of one list that a form may send. */
const mostRows = 60;

const emptyRow = (list: DraftList): Record<string, string> =>
	Object.fromEntries(draftLists[list].map((column) => [column, '']));

/** Reads the rows `<list>.<n>.<column>` that a form sent, in the order of n. */
const rowsOf = (list: DraftList, sent: ReadonlyMap<string, string>): Record<string, string>[] => {
	const numbers = [...sent.keys()].flatMap((name) => {
		const [, at] = new RegExp(`^${list}\\.(\\d{1,3})\\.`).exec(name) ?? [];
		return at === undefined ? [] : [Number(at)];
	});
	return [...new Set(numbers)]
		.sort((a, b) => a - b)
		.slice(0, mostRows)
		.map((n) =>
			Object.fromEntries(
				draftLists[list].map((column) => [column, (sent.get(`${list}.${n}.${column}`) ?? '').trim()])
			)
		);
};

/** The draft that a form sent. Unknown names are left out; longer texts than any field takes are cut. */
export const draftOf = (entries: Iterable<readonly [string, unknown]>): SpecificationDraft => {
	const sent = new Map<string, string>();
	for (const [name, value] of entries)
		if (typeof value === 'string') sent.set(name, value.slice(0, 20_000).normalize('NFC'));
	return {
		...Object.fromEntries(fields.map((field) => [field, (sent.get(field) ?? '').trim()])),
		...Object.fromEntries(ticks.map((tick) => [tick, sent.has(tick)])),
		...Object.fromEntries((Object.keys(draftLists) as DraftList[]).map((list) => [list, rowsOf(list, sent)]))
	} as unknown as SpecificationDraft;
};

/** Adds an empty row to a list, `add:series`, or takes one out, `remove:short:2`. Anything else changes nothing. */
export const editRows = (draft: SpecificationDraft, edit: string): SpecificationDraft => {
	const [verb, list, at] = edit.split(':');
	if (list === undefined || !Object.hasOwn(draftLists, list)) return draft;
	const rows = draft[list as DraftList] as readonly Record<string, string>[];
	if (verb === 'add' && rows.length < mostRows)
		return { ...draft, [list]: [...rows, emptyRow(list as DraftList)] };
	if (verb === 'remove') return { ...draft, [list]: rows.filter((_, i) => String(i) !== at) };
	return draft;
};

/** The form of a first version: a series for each declared driver, one empty one for the dependent variable. */
export const emptyDraft = (known: {
	readonly frequency: string;
	readonly drivers: readonly string[];
	readonly from?: string;
	readonly to?: string;
}): SpecificationDraft => ({
	frequency: known.frequency,
	dependent: '',
	from: known.from ?? '',
	to: known.to ?? '',
	estimator: 'two-step',
	standardErrors: 'ols',
	longConstant: true,
	longTrend: false,
	shortConstant: false,
	own: '1',
	imposedConstant: '',
	imposedTrend: '',
	series: ['', ...known.drivers].map((name) => ({ name, column: name, unit: '', transform: '' })),
	long: known.drivers.map((series) => ({ series, slope: '' })),
	short: known.drivers.map((series) => ({ series, lags: '0', sign: '' })),
	dummies: [],
	fixed: [],
	claimedSource: '',
	claims: '',
	reason: ''
});

const decimalText = (value: number | undefined): string => (value === undefined ? '' : String(value));

/** The form of a version that exists: to revise a draft, or to begin the next version from it. */
export const draftOfSpecification = (spec: Specification, reason = ''): SpecificationDraft => {
	const { imposed } = spec.estimator;
	const inLongRun = new Set(spec.longRun.drivers.map(({ series }) => series));
	return {
		frequency: spec.frequency,
		dependent: spec.dependent,
		from: spec.sample.from,
		to: spec.sample.to,
		estimator: spec.estimator.kind,
		standardErrors: spec.standardErrors,
		longConstant: spec.longRun.constant,
		longTrend: spec.longRun.trend,
		shortConstant: spec.shortRun.constant,
		own: spec.shortRun.own.join(', '),
		imposedConstant: decimalText(imposed?.constant),
		imposedTrend: decimalText(imposed?.trend),
		series: spec.series.map(({ name, column, unit, transform }) => ({
			name,
			column,
			unit,
			transform: stepsText(transform)
		})),
		long: spec.longRun.drivers.map(({ series }) => ({
			series,
			slope: decimalText(imposed?.slopes.find((slope) => slope.series === series)?.value)
		})),
		short: spec.shortRun.drivers.map(({ series, lags, sign }) => ({
			series,
			lags: lags.join(', '),
			sign: inLongRun.has(series) ? sign : ''
		})),
		dummies: spec.dummies.map(({ name, kind, from, to, in: place, reason: why }) => ({
			name,
			kind,
			from: from ?? '',
			to: to ?? '',
			in: place,
			reason: why
		})),
		fixed: spec.fixed.map(({ term, value, reason: why }) => ({ term, value: String(value), reason: why })),
		claimedSource: spec.claimed?.source ?? '',
		claims: (spec.claimed?.coefficients ?? [])
			.map(({ term, value, se }) => [term, value, ...(se === undefined ? [] : [se])].join('\t'))
			.join('\n'),
		reason
	};
};
