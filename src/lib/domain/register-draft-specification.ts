import type { Issue } from './faults';
import { parseClaims, type PastedClaims } from './register-claims';
import type { SpecificationDraft } from './register-draft';
import type { DeclaredSign } from './register-signs';
import { parseLags, parseSteps } from './register-steps';
import type { Frequency } from './period';
import type { Specification } from './specification';

/** A declaration in force, with the words that go into the specification. */
export interface DraftDeclaration extends DeclaredSign {
	readonly rationale: string;
}

/** Something wrong in the form: the name of the field and how to mend it. */
export interface DraftIssue {
	readonly field: string;
	readonly message: string;
}

export interface ReadDraft {
	/** What the form says so far; whole when there are no issues of shape. */
	readonly specification: Specification;
	readonly issues: readonly DraftIssue[];
	readonly claims?: PastedClaims;
	/** Where the specification's rows stand in the form, for issues found later. */
	readonly fieldOf: (pointer: string) => string;
}

/** Rows in which anything was typed, with their places in the form. */
const typedRows = <T extends object>(rows: readonly T[], by: readonly (keyof T)[]): [T, number][] =>
	rows.flatMap((row, i): [T, number][] => (by.some((column) => row[column] !== '') ? [[row, i]] : []));

type Wrong = (field: string, message: string) => void;

const numberOf = (text: string, field: string, wrong: Wrong): number => {
	const plain = text.replace('\u2212', '-');
	const value = Number(plain);
	if (plain !== '' && Number.isFinite(value)) return value;
	wrong(field, text === '' ? 'Write the number.' : `"${text}" is not a number: write it as in -0.187.`);
	return 0;
};

const seriesPart = (
	rows: [SpecificationDraft['series'][number], number][],
	wrong: Wrong
): Specification['series'] =>
	rows.map(([{ name, column, unit, transform }, i]) => {
		const { steps, fault } = parseSteps(transform);
		if (fault !== undefined) wrong(`series.${i}.transform`, fault);
		return { name, column: column === '' ? name : column, unit, transform: steps };
	});

const longPart = (
	draft: SpecificationDraft,
	rows: [SpecificationDraft['long'][number], number][],
	declared: readonly DraftDeclaration[],
	wrong: Wrong
): Specification['longRun'] => ({
	drivers: rows.map(([{ series }, i]) => {
		const said = declared.find((each) => each.series === series);
		if (!said)
			wrong(`long.${i}.series`, `Declare the sign and plausible range of ${series || 'this driver'} first.`);
		return {
			series,
			sign: said?.sign ?? 'any',
			plausible: [said?.low ?? 0, said?.high ?? 0],
			rationale: said?.rationale ?? ''
		};
	}),
	constant: draft.longConstant,
	trend: draft.longTrend
});

const shortPart = (
	draft: SpecificationDraft,
	rows: [SpecificationDraft['short'][number], number][],
	declared: readonly DraftDeclaration[],
	wrong: Wrong
): Specification['shortRun'] => {
	const lagsOf = (text: string, field: string): number[] => {
		const { lags, fault } = parseLags(text);
		if (fault !== undefined) wrong(field, fault);
		return lags;
	};
	const inLongRun = new Set(draft.long.map(({ series }) => series));
	return {
		own: lagsOf(draft.own, 'own'),
		drivers: rows.map(([{ series, lags, sign }, i]) => {
			const said = declared.find((each) => each.series === series);
			if (!said)
				wrong(
					`short.${i}.series`,
					`Declare the sign and plausible range of ${series || 'this driver'} first.`
				);
			// What acts in the short run only has one sign, the declared one; else its first effect may differ.
			const free = inLongRun.has(series) ? 'any' : (said?.sign ?? 'any');
			return {
				series,
				lags: lagsOf(lags, `short.${i}.lags`),
				sign: sign === '+' || sign === '-' || sign === 'any' ? sign : free
			};
		}),
		constant: draft.shortConstant
	};
};

const estimatorPart = (
	draft: SpecificationDraft,
	long: [SpecificationDraft['long'][number], number][],
	wrong: Wrong
): Specification['estimator'] => {
	const kind = draft.estimator as Specification['estimator']['kind'];
	if (kind !== 'imposed') return { kind };
	return {
		kind,
		imposed: {
			constant: numberOf(draft.imposedConstant, 'imposedConstant', wrong),
			...(draft.longTrend && { trend: numberOf(draft.imposedTrend, 'imposedTrend', wrong) }),
			slopes: long.map(([{ series, slope }, i]) => ({
				series,
				value: numberOf(slope, `long.${i}.slope`, wrong)
			}))
		}
	};
};

const dummyPart = (rows: [SpecificationDraft['dummies'][number], number][]): Specification['dummies'] =>
	rows.map(([{ name, kind, from, to, in: place, reason }]) => ({
		name,
		kind: kind as 'pulse',
		...(from !== '' && { from }),
		...(to !== '' && { to }),
		in: place as 'short',
		reason
	}));

/** Places of the form's fields for the pointers of the specification. */
const fieldMap = (
	kept: Readonly<Record<'series' | 'long' | 'short' | 'dummies' | 'fixed', readonly number[]>>
) => {
	const rows: readonly (readonly [RegExp, (at: number, rest: string) => string])[] = [
		[/^\/series\/(\d+)(?:\/(\w+))?/, (at, rest) => `series.${kept.series[at] ?? 0}.${rest || 'name'}`],
		[/^\/longRun\/drivers\/(\d+)/, (at) => `long.${kept.long[at] ?? 0}.series`],
		[
			/^\/shortRun\/drivers\/(\d+)(?:\/(\w+))?/,
			(at, rest) => `short.${kept.short[at] ?? 0}.${rest === 'lags' ? 'lags' : 'series'}`
		],
		[/^\/dummies\/(\d+)(?:\/(\w+))?/, (at, rest) => `dummies.${kept.dummies[at] ?? 0}.${rest || 'name'}`],
		[/^\/fixed\/(\d+)(?:\/(\w+))?/, (at, rest) => `fixed.${kept.fixed[at] ?? 0}.${rest || 'term'}`]
	];
	const plain: readonly (readonly [string, string])[] = [
		['/sample/from', 'from'],
		['/sample/to', 'to'],
		['/shortRun/own', 'own'],
		['/shortRun/constant', 'shortConstant'],
		['/longRun/constant', 'longConstant'],
		['/longRun/trend', 'longTrend'],
		['/estimator/imposed/trend', 'imposedTrend'],
		['/estimator/imposed', 'imposedConstant'],
		['/estimator', 'estimator'],
		['/standardErrors', 'standardErrors'],
		['/frequency', 'frequency'],
		['/dependent', 'dependent'],
		['/claimed/source', 'claimedSource'],
		['/claimed', 'claims'],
		['/reason', 'reason']
	];
	return (pointer: string): string => {
		for (const [pattern, place] of rows) {
			const [found, at, rest] = pattern.exec(pointer) ?? [];
			if (found !== undefined) return place(Number(at), rest ?? '');
		}
		return plain.find(([prefix]) => pointer.startsWith(prefix))?.[1] ?? '';
	};
};

/**
 * Reads a form as a specification. Rows left empty are not there; signs and ranges come from the declarations, so that
 * nobody types an expectation beside an estimate. Half-typed forms are read as far as they go.
 */
export const readDraft = (draft: SpecificationDraft, declared: readonly DraftDeclaration[]): ReadDraft => {
	const issues: DraftIssue[] = [];
	const wrong: Wrong = (field, message) => void issues.push({ field, message });
	const series = typedRows(draft.series, ['name', 'column', 'unit', 'transform']);
	const long = typedRows(draft.long, ['series', 'slope']);
	const short = typedRows(draft.short, ['series']);
	const dummies = typedRows(draft.dummies, ['name', 'from', 'to', 'reason']);
	const fixed = typedRows(draft.fixed, ['term', 'value', 'reason']);
	const specification: Specification = {
		schema: 1,
		frequency: draft.frequency as Frequency,
		series: seriesPart(series, wrong),
		dependent: draft.dependent,
		longRun: longPart(draft, long, declared, wrong),
		shortRun: shortPart(draft, short, declared, wrong),
		dummies: dummyPart(dummies),
		fixed: fixed.map(([{ term, value, reason }, i]) => ({
			term,
			value: numberOf(value, `fixed.${i}.value`, wrong),
			reason
		})),
		sample: { from: draft.from, to: draft.to },
		estimator: estimatorPart(draft, long, wrong),
		standardErrors: draft.standardErrors as Specification['standardErrors']
	};
	const places = (rows: readonly [object, number][]): number[] => rows.map(([, i]) => i);
	const fieldOf = fieldMap({
		series: places(series),
		long: places(long),
		short: places(short),
		dummies: places(dummies),
		fixed: places(fixed)
	});
	if (draft.claims === '') return { specification, issues, fieldOf };
	const claims = parseClaims(draft.claims, specification);
	for (const { message } of claims.issues) wrong('claims', message);
	if (draft.claimedSource === '') wrong('claimedSource', 'Say where the claimed figures stand.');
	const claimed = { source: draft.claimedSource, coefficients: [...claims.coefficients] };
	return { specification: { ...specification, claimed }, issues, claims, fieldOf };
};

/** Issues of a specification as issues of the form. */
export const draftIssues = (read: ReadDraft, issues: readonly Issue[]): readonly DraftIssue[] =>
	issues.map(({ pointer, message }) => ({ field: read.fieldOf(pointer), message }));
