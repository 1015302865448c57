import { driversOf, largestLagOf } from './lag-coefficients';
import type { Coefficients, Term } from './terms';

/**
 * The same equation in two dresses. Error-correction form: dy(t) on y(t-1), x(t-1), dy(t-i), dx(t-l). Levels form
 * (autoregressive distributed lag): y(t) on y(t-i), x(t-l). The map between them is linear, with whole numbers
 * and one constant: the 1 in mu(1) = 1 + b_y + c(1). Bardsen (1989) Oxford Bulletin 51, 345-350.
 */

/** A linear map of coefficient vectors: out = matrix in + offset; row-major, rows x cols. */
interface AffineMap {
	readonly terms: readonly Term[];
	readonly matrix: readonly (readonly number[])[];
	readonly offset: readonly number[];
}

/** The levels form of an equation in error-correction form with free levels, with its covariance. */
export const toLevels = (ecm: Coefficients): Coefficients => apply(levelsMap(ecm), ecm);

/** The error-correction form of an equation in levels; lags that the levels form lacks count as 0. */
export const toErrorCorrection = (adl: Coefficients): Coefficients => apply(errorCorrectionMap(adl), adl);

function levelsMap(ecm: Coefficients): AffineMap {
	const { terms } = ecm;
	const rows: Row[] = deterministicRows(terms);
	const own = (lag: number) => (term: Term) => term.kind === 'own-change' && term.lag === lag;
	const isLevel = (term: Term) => term.kind === 'own-level';
	const p = Math.max(
		0,
		largestLagOf(terms, (term) => term.kind === 'own-change')
	);
	for (let i = 1; i <= p + 1; i++) {
		const parts: Part[] = [[own(i), 1]];
		parts.push(i === 1 ? [isLevel, 1] : [own(i - 1), -1]);
		rows.push({ term: { kind: 'own-level', lag: i }, parts, offset: i === 1 ? 1 : 0 });
	}
	for (const series of driversOf(terms)) {
		const change = (lag: number) => (term: Term) =>
			term.kind === 'driver-change' && term.series === series && term.lag === lag;
		const level = (term: Term) => term.kind === 'driver-level' && term.series === series;
		const q = largestLagOf(terms, (term) => term.kind === 'driver-change' && term.series === series);
		for (let l = q < 0 ? 1 : 0; l <= Math.max(q, 0) + 1; l++) {
			const parts: Part[] = [[change(l), 1]];
			if (l > 0) parts.push([change(l - 1), -1]);
			if (l === 1) parts.push([level, 1]);
			rows.push({ term: { kind: 'driver-level', series, lag: l }, parts, offset: 0 });
		}
	}
	return build(terms, rows);
}

function errorCorrectionMap(adl: Coefficients): AffineMap {
	const { terms } = adl;
	const rows: Row[] = deterministicRows(terms);
	const ownBeyond = (lag: number) => (term: Term) => term.kind === 'own-level' && term.lag > lag;
	const p = largestLagOf(terms, (term) => term.kind === 'own-level') - 1;
	const drivers = driversOf(terms).map((series) => {
		const beyond = (lag: number) => (term: Term) =>
			term.kind === 'driver-level' && term.series === series && term.lag > lag;
		return { series, beyond, last: largestLagOf(terms, beyond(-1)) };
	});
	rows.push({ term: { kind: 'own-level', lag: 1 }, parts: [[ownBeyond(0), 1]], offset: -1 });
	for (const { series, beyond } of drivers)
		rows.push({ term: { kind: 'driver-level', series, lag: 1 }, parts: [[beyond(-1), 1]], offset: 0 });
	for (let i = 1; i <= p; i++)
		rows.push({ term: { kind: 'own-change', lag: i }, parts: [[ownBeyond(i), -1]], offset: 0 });
	for (const { series, beyond, last } of drivers) {
		const now = (term: Term) => beyond(-1)(term) && !beyond(0)(term);
		if (terms.some(now))
			rows.push({ term: { kind: 'driver-change', series, lag: 0 }, parts: [[now, 1]], offset: 0 });
		for (let l = 1; l < last; l++)
			rows.push({ term: { kind: 'driver-change', series, lag: l }, parts: [[beyond(l), -1]], offset: 0 });
	}
	return build(terms, rows);
}

type Part = readonly [test: (term: Term) => boolean, weight: number];

interface Row {
	readonly term: Term;
	readonly parts: readonly Part[];
	readonly offset: number;
}

const isDeterministic = (term: Term): boolean =>
	term.kind === 'constant' || term.kind === 'trend' || term.kind === 'dummy' || term.kind === 'level-dummy';

const deterministicRows = (terms: readonly Term[]): Row[] =>
	terms.filter(isDeterministic).map((term) => ({ term, parts: [[(other) => other === term, 1]], offset: 0 }));

/** Weights of every input term in every output row; a part may match several terms. */
function build(inputs: readonly Term[], rows: readonly Row[]): AffineMap {
	return {
		terms: rows.map((row) => row.term),
		matrix: rows.map((row) =>
			inputs.map((term) => row.parts.reduce((sum, [test, weight]) => (test(term) ? sum + weight : sum), 0))
		),
		offset: rows.map((row) => row.offset)
	};
}

function apply(map: AffineMap, input: Coefficients): Coefficients {
	const { matrix, offset, terms } = map;
	const values = Float64Array.from(matrix, (row, r) =>
		row.reduce((sum, weight, j) => sum + weight * input.values[j]!, offset[r]!)
	);
	return Object.freeze({
		terms: Object.freeze([...terms]),
		values,
		covariance: input.covariance && transformed(matrix, input.covariance),
		df: input.df
	});
}

/** M V M', column-major. */
function transformed(matrix: readonly (readonly number[])[], v: Float64Array): Float64Array {
	const rows = matrix.length;
	const cols = matrix[0]!.length;
	const out = new Float64Array(rows * rows);
	for (let b = 0; b < rows; b++) {
		const weighted = new Float64Array(cols);
		for (let i = 0; i < cols; i++) {
			for (let j = 0; j < cols; j++) weighted[i]! += v[j * cols + i]! * matrix[b]![j]!;
		}
		for (let a = 0; a < rows; a++) {
			for (let i = 0; i < cols; i++) out[b * rows + a]! += matrix[a]![i]! * weighted[i]!;
		}
	}
	return out;
}
