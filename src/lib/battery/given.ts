import { equationDesign } from '$lib/econometrics/error-correction/design';
import type { Relation } from '$lib/econometrics/error-correction/equation';
import { adjustmentOf } from '$lib/econometrics/error-correction/fit';
import { gapFrom } from '$lib/econometrics/error-correction/gap';
import { longRun } from '$lib/econometrics/error-correction/long-run';
import { typedFigure } from '$lib/econometrics/error-correction/replication';
import { termName, type Coefficients } from '$lib/econometrics/error-correction/terms';
import { isRefusal, type Refusal } from '$lib/econometrics/refusal';
import type { Specification } from '$lib/domain/specification';
import { levelsAreFree } from '$lib/domain/specification-terms';
import type { Model } from './model';
import type { ModelSample } from './sample';

/** Claimed values by term code; texts are read with their digits. */
const claimedValues = (spec: Specification): ReadonlyMap<string, number> =>
	new Map(
		(spec.claimed?.coefficients ?? []).flatMap(({ term, value }) => {
			const typed = typedFigure(value);
			return isRefusal(typed) ? [] : [[term, typed.value] as const];
		})
	);

const relationFrom = (
	spec: Specification,
	data: ModelSample,
	values: ReadonlyMap<string, number>
): Relation =>
	Object.freeze({
		constant: values.get('long.const') ?? 0,
		trend: values.get('long.trend') ?? 0,
		slopes: spec.longRun.drivers.map(({ series }) => ({ series, value: values.get(`long.${series}`)! })),
		dummies: data.equation.dummies
			.filter((dummy) => dummy.in !== 'short')
			.map(({ name }) => ({ name, value: values.get(`long.${name}`)! }))
	});

/** Claimed covariance in the order of `codes`, column-major; null unless every code is covered. */
const covarianceFrom = (spec: Specification, codes: readonly string[]): Float64Array | null => {
	const claimed = spec.claimed?.covariance;
	if (!claimed) return null;
	const at = codes.map((code) => claimed.terms.indexOf(code));
	if (at.includes(-1)) return null;
	return Float64Array.from({ length: codes.length ** 2 }, (_, i) => {
		const [row, column] = [i % codes.length, Math.floor(i / codes.length)];
		return claimed.rows[at[row]!]![at[column]!]!;
	});
};

/** y - Xb with the given b, on the left-hand side net of fixed terms. */
const residualsOf = (y: Float64Array, columns: readonly Float64Array[], b: Float64Array): Float64Array =>
	y.map((value, row) => columns.reduce((rest, column, j) => rest - b[j]! * column[row]!, value));

/** A model whose coefficients were estimated elsewhere: nothing is estimated here. */
export const givenModel = (spec: Specification, data: ModelSample): Model | Refusal => {
	const values = claimedValues(spec);
	const free = levelsAreFree(spec);
	const stated = free ? null : relationFrom(spec, data, values);
	const design = equationDesign(
		data.equation,
		data.sample,
		stated ? { gap: gapFrom(stated, data.equation, data.sample) } : 'levels'
	);
	if (isRefusal(design)) return design;
	const codes = design.free.map(termName);
	const b = Float64Array.from(codes, (code) => values.get(code)!);
	const residuals = residualsOf(design.y, design.design.columns, b);
	const coefficients: Coefficients = Object.freeze({
		terms: Object.freeze([...design.free, ...design.fixed.map(({ term }) => term)]),
		values: Float64Array.from([...b, ...design.fixed.map(({ value }) => value)]),
		covariance: design.fixed.length === 0 ? covarianceFrom(spec, codes) : null,
		df: residuals.length - codes.length
	});
	const implied = free ? longRun(coefficients) : null;
	const determined = implied && !isRefusal(implied) ? implied : null;
	const relation = stated ?? determined?.relation ?? null;
	return Object.freeze({
		spec,
		data,
		form: free ? 'levels' : 'gap',
		design,
		coefficients,
		residuals,
		fit: null,
		adjustment: adjustmentOf(coefficients),
		relation,
		static: null,
		gap: relation && gapFrom(relation, data.equation, data.sample),
		determined,
		unrestricted: null,
		errors: { kind: spec.standardErrors }
	});
};
