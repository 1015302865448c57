import { refuse, type Refusal } from '../refusal';
import type { Transformed } from './transform';
import type { TransformStep } from './transform-step';

/**
 * Takes a path of the transformed series over a horizon back to the units of the data: the chain run backwards, each
 * step starting from the history kept by `transform`. The horizon follows the last period of `history`. Bands are
 * inverted by inverting their ends, never by scaling their half-width.
 *
 * `future` gives each column that a ratio or deflate step divided by, over the same horizon. A lag of k shortens the
 * result by k periods: the path says nothing about the last k. Refuses `no-scenario` when such a column is missing,
 * `lag` when the lags leave no period, `non-finite` when a value overflows.
 */
export function inverseTransform(
	path: Float64Array,
	steps: readonly TransformStep[],
	history: Transformed,
	perYear: number,
	future: ReadonlyMap<string, Float64Array>
): Float64Array | Refusal {
	let values = path;
	for (let s = steps.length - 1; s >= 0; s--) {
		const step = steps[s]!;
		const past = history.stages[s]!.slice(0, history.last + 1);
		if ('column' in step) {
			const w = future.get(step.column);
			if (!w || w.length < values.length)
				return refuse('no-scenario', `The path of ${step.column} is needed over the whole horizon.`);
			values = values.map((x, h) => (step.step === 'ratio' ? x * w[h]! : (x * w[h]!) / 100));
		} else {
			values = invertStep(values, step, past, perYear);
		}
		if (values.length === 0)
			return refuse('lag', `The horizon of ${path.length} periods is shorter than the lag.`);
	}
	const bad = values.findIndex((value) => !Number.isFinite(value));
	return bad < 0
		? values
		: refuse('non-finite', `The path of ${history.name} leaves the range of numbers in period ${bad + 1}.`);
}

type OwnStep = Exclude<TransformStep, { readonly step: 'ratio' | 'deflate' }>;

function invertStep(x: Float64Array, step: OwnStep, past: Float64Array, f: number): Float64Array {
	switch (step.step) {
		case 'log':
			return x.map(Math.exp);
		case 'logit':
			return x.map((value) => 1 / (1 + Math.exp(-value)));
		case 'scale':
			return x.map((value) => value / step.by);
		case 'diff':
			return onwards(x, past, (value, back) => back(1) + value);
		case 'yoy':
			return onwards(x, past, (value, back) => back(f) * (1 + value / 100));
		case 'log-diff':
			return onwards(x, past, (value, back) => back(1) * Math.exp(value));
		case 'log-yoy':
			return onwards(x, past, (value, back) => back(f) * Math.exp(value));
		case 'lag':
			return x.slice(step.by);
		case 'mean':
			return onwards(x, past, (value, back) => value * step.of - previous(back, step.of - 1));
		case 'sum':
			return onwards(x, past, (value, back) => value - previous(back, step.of - 1));
	}
}

/** Builds values one after the other; `back(k)` is the value k periods before the one being built. */
function onwards(
	x: Float64Array,
	past: Float64Array,
	next: (value: number, back: (k: number) => number) => number
): Float64Array {
	const built = new Float64Array(past.length + x.length);
	built.set(past);
	for (let h = 0; h < x.length; h++) {
		const t = past.length + h;
		built[t] = next(x[h]!, (k) => built[t - k]!);
	}
	return built.slice(past.length);
}

function previous(back: (k: number) => number, count: number): number {
	let total = 0;
	for (let k = 1; k <= count; k++) total += back(k);
	return total;
}
