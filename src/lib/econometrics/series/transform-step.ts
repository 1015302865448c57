/** One step of a transform; steps of a chain are applied in order. */
export type TransformStep =
	| { readonly step: 'log' | 'logit' | 'diff' | 'yoy' | 'log-diff' | 'log-yoy' }
	| { readonly step: 'scale'; readonly by: number }
	| { readonly step: 'ratio' | 'deflate'; readonly column: string }
	| { readonly step: 'mean' | 'sum'; readonly of: number }
	| { readonly step: 'lag'; readonly by: number };

/** What a step needs beside the series itself. Arrays are aligned with the series; NaN is a blank. */
export interface StepContext {
	readonly perYear: number;
	readonly column: (name: string) => Float64Array | undefined;
}

/** Values over the same periods (NaN where the step reaches before the data), or the first period it cannot serve. */
export type StepOutcome = { readonly values: Float64Array } | { readonly row: number; readonly why: string };

/** Applies one step to a series in which NaN is a blank. */
export function applyStep(v: Float64Array, step: TransformStep, context: StepContext): StepOutcome {
	const f = context.perYear;
	switch (step.step) {
		case 'log':
			return logarithm(v);
		case 'logit':
			return pointwise(
				v,
				(x) => Math.log(x / (1 - x)),
				(x) => x > 0 && x < 1,
				'is not between 0 and 1; a series in per cent must be divided by 100 before logit'
			);
		case 'scale':
			return pointwise(
				v,
				(x) => x * step.by,
				() => step.by !== 0,
				'cannot be scaled by 0'
			);
		case 'diff':
			return against(v, 1, (x, base) => x - base);
		case 'yoy':
			return against(
				v,
				f,
				(x, base) => 100 * (x / base - 1),
				(_, base) => base !== 0,
				'has a base of 0 a year before'
			);
		case 'log-diff':
			return changeOfLog(v, 1);
		case 'log-yoy':
			return changeOfLog(v, f);
		case 'lag':
			return against(v, step.by, (_, base) => base);
		case 'mean':
			return { values: movingSum(v, step.of).map((x) => x / step.of) };
		case 'sum':
			return { values: movingSum(v, step.of) };
		case 'ratio':
			return withColumn(
				v,
				context.column(step.column),
				(x, w) => x / w,
				(w) => w !== 0,
				`is divided by 0 (${step.column})`
			);
		case 'deflate':
			return withColumn(
				v,
				context.column(step.column),
				(x, w) => (100 * x) / w,
				(w) => w > 0,
				`has no positive price index (${step.column})`
			);
	}
}

const logarithm = (v: Float64Array): StepOutcome =>
	pointwise(v, Math.log, (x) => x > 0, 'is not positive, so it has no logarithm');

function changeOfLog(v: Float64Array, back: number): StepOutcome {
	const logs = logarithm(v);
	return 'row' in logs ? logs : against(logs.values, back, (x, base) => x - base);
}

const always = (): boolean => true;

function pointwise(
	v: Float64Array,
	map: (x: number) => number,
	allowed: (x: number) => boolean,
	why: string
): StepOutcome {
	const row = v.findIndex((x) => !Number.isNaN(x) && !allowed(x));
	return row >= 0 ? { row, why } : { values: v.map(map) };
}

/** A value against the one `back` periods before. A lag is defined also where the value itself is blank. */
function against(
	v: Float64Array,
	back: number,
	map: (x: number, base: number) => number,
	allowed: (x: number, base: number) => boolean = always,
	why = ''
): StepOutcome {
	const values = new Float64Array(v.length).fill(NaN);
	for (let t = back; t < v.length; t++) {
		const x = v[t]!;
		const base = v[t - back]!;
		if (!Number.isNaN(x) && !Number.isNaN(base) && !allowed(x, base)) return { row: t, why };
		values[t] = map(x, base);
	}
	return { values };
}

function movingSum(v: Float64Array, of: number): Float64Array {
	const values = new Float64Array(v.length).fill(NaN);
	for (let t = of - 1; t < v.length; t++) {
		let total = 0;
		for (let i = t - of + 1; i <= t; i++) total += v[i]!;
		values[t] = total;
	}
	return values;
}

function withColumn(
	v: Float64Array,
	w: Float64Array | undefined,
	map: (x: number, w: number) => number,
	allowed: (w: number) => boolean,
	why: string
): StepOutcome {
	if (!w) return { row: 0, why: 'needs a column that the data do not have' };
	const row = v.findIndex((x, t) => !Number.isNaN(x) && !Number.isNaN(w[t]!) && !allowed(w[t]!));
	return row >= 0 ? { row, why } : { values: v.map((x, t) => map(x, w[t]!)) };
}
