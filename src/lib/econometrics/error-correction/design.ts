import { refuse, type Refusal } from '../refusal';
import { designOf, type Design } from '../series/design';
import { lagged, laggedDifference } from '../series/lags';
import {
	longRunDummies,
	shortRunDummies,
	type Equation,
	type FixedCoefficient,
	type Sample
} from './equation';
import { termName, type Term } from './terms';

/** How the long run enters: as free levels, as a gap that is known beforehand, or not at all. */
export type LongRunForm = 'levels' | 'none' | { readonly gap: Float64Array };

/** The regression behind an error-correction equation. Row r is period firstPeriod + r. */
export interface EquationDesign {
	/** Change of the dependent variable, less what the fixed coefficients explain. */
	readonly y: Float64Array;
	readonly design: Design;
	/** Terms of the columns of `design`. */
	readonly free: readonly Term[];
	readonly fixed: readonly { readonly term: Term; readonly value: number }[];
	readonly maxLag: number;
	readonly firstPeriod: number;
}

interface Column {
	readonly term: Term;
	readonly values: Float64Array;
}

/**
 * Builds the regression of dy(t) on the terms of an equation, for t = maxLag + 2 .. T: constant, trend, short-run
 * dummies, lagged levels (or the lagged gap), lags of dy, lags of dx driver by driver. The trend counts periods
 * of the sample from 1. Fixed coefficients move their term to the left-hand side.
 */
export function equationDesign(
	equation: Equation,
	sample: Sample,
	form: LongRunForm
): EquationDesign | Refusal {
	const refusal = refuseSample(equation, sample) ?? refuseLagLists(equation, sample.T);
	if (refusal) return refusal;
	const maxLag = largestLag(equation);
	const columns = equationColumns(equation, sample, form, maxLag);
	const names = columns.map((column) => termName(column.term));
	const twice = names.find((name, i) => names.indexOf(name) !== i);
	if (twice !== undefined)
		return refuse('duplicate', `two regressors would be called ${twice}; rename a series`);
	const unknown = equation.fixed.find((fixed) => !names.includes(fixed.term));
	if (unknown)
		return refuse('domain', `the fixed coefficient ${unknown.term} names no term of this equation`);
	return splitFixed(equation.fixed, change(sample.series.get(equation.dependent)!, maxLag), columns, maxLag);
}

/** The largest lag of a change in the equation, which costs that many rows at the start. */
export const largestLag = (equation: Equation): number =>
	Math.max(0, ...equation.shortRun.own, ...equation.shortRun.drivers.flatMap((driver) => driver.lags));

function equationColumns(
	equation: Equation,
	sample: Sample,
	form: LongRunForm,
	m: number
): readonly Column[] {
	const rows = sample.T - m - 1;
	const build = (value: (t: number) => number) =>
		Float64Array.from({ length: rows }, (_, r) => value(m + 2 + r));
	const back = (v: Float64Array, by: number) => lagged(v, by, m + 1, sample.T - 1);
	const levels = form === 'levels';
	const columns: Column[] = [];
	if (equation.shortRun.constant || (levels && equation.longRun.constant))
		columns.push({ term: { kind: 'constant' }, values: build(() => 1) });
	if (levels && equation.longRun.trend) columns.push({ term: { kind: 'trend' }, values: build((t) => t) });
	for (const { name, values } of shortRunDummies(equation))
		columns.push({ term: { kind: 'dummy', name }, values: back(values, 0) });
	if (levels) {
		columns.push({
			term: { kind: 'own-level', lag: 1 },
			values: back(sample.series.get(equation.dependent)!, 1)
		});
		for (const series of equation.longRun.drivers)
			columns.push({
				term: { kind: 'driver-level', series, lag: 1 },
				values: back(sample.series.get(series)!, 1)
			});
		for (const { name, values } of longRunDummies(equation))
			columns.push({ term: { kind: 'level-dummy', name }, values: back(values, 1) });
	} else if (form !== 'none') columns.push({ term: { kind: 'gap' }, values: back(form.gap, 1) });
	return [...columns, ...shortRunColumns(equation, sample, m)];
}

function shortRunColumns(equation: Equation, sample: Sample, m: number): readonly Column[] {
	const own = sample.series.get(equation.dependent)!;
	const ownColumns = equation.shortRun.own.map((lag): Column => ({
		term: { kind: 'own-change', lag },
		values: change(own, m, lag)
	}));
	const driverColumns = equation.shortRun.drivers.flatMap(({ series, lags }) =>
		lags.map((lag): Column => ({
			term: { kind: 'driver-change', series, lag },
			values: change(sample.series.get(series)!, m, lag)
		}))
	);
	return [...ownColumns, ...driverColumns];
}

/** v(t-lag) - v(t-lag-1) for t = m+2 .. T. */
const change = (v: Float64Array, m: number, lag = 0): Float64Array =>
	laggedDifference(v, lag, m + 1, v.length - 1);

function splitFixed(
	fixed: readonly FixedCoefficient[],
	dy: Float64Array,
	columns: readonly Column[],
	maxLag: number
): EquationDesign {
	const valueFor = (column: Column) => fixed.find((f) => f.term === termName(column.term))?.value;
	const free = columns.filter((column) => valueFor(column) === undefined);
	const imposed = columns.flatMap((column) => {
		const value = valueFor(column);
		return value === undefined ? [] : [{ ...column, value }];
	});
	const y = dy.map((value, r) => imposed.reduce((rest, f) => rest - f.value * f.values[r]!, value));
	return Object.freeze({
		y,
		design: designOf(free.map(({ term, values }) => ({ name: termName(term), column: values }))),
		free: Object.freeze(free.map((column) => column.term)),
		fixed: Object.freeze(imposed.map(({ term, value }) => Object.freeze({ term, value }))),
		maxLag,
		firstPeriod: maxLag + 2
	});
}

function refuseSample(equation: Equation, sample: Sample): Refusal | null {
	const needed = [
		equation.dependent,
		...equation.longRun.drivers,
		...equation.shortRun.drivers.map((driver) => driver.series)
	];
	for (const name of needed) {
		const v = sample.series.get(name);
		if (v === undefined) return refuse('domain', `the sample has no series ${name}`);
		if (v.length !== sample.T) return refuse('gap', `${name} has ${v.length} of ${sample.T} periods`);
		const bad = v.findIndex((value) => !Number.isFinite(value));
		if (bad >= 0) return refuse('non-finite', `${name} is not a finite number in period ${bad + 1}`);
	}
	const short = equation.dummies.find((dummy) => dummy.values.length !== sample.T);
	if (short)
		return refuse('gap', `the dummy ${short.name} has ${short.values.length} of ${sample.T} periods`);
	return null;
}

function refuseLagLists(equation: Equation, T: number): Refusal | null {
	const lists = [
		{ series: equation.dependent, lags: equation.shortRun.own, least: 1 },
		...equation.shortRun.drivers.map((driver) => ({ ...driver, least: 0 }))
	];
	for (const { series, lags, least } of lists) {
		const bad = lags.find((lag) => !Number.isInteger(lag) || lag < least);
		if (bad !== undefined) return refuse('lag', `${bad} is not a lag of the change of ${series}`);
	}
	const m = largestLag(equation);
	if (m + 2 > T) return refuse('lag', `a lag of ${m} leaves no row of ${T} periods`);
	return null;
}
