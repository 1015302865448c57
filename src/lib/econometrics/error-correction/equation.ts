/**
 * An error-correction equation as a list of regressors: which lags of which series, term by term, because real
 * models are pruned. Series are in levels after their transforms.
 */
export interface Equation {
	readonly dependent: string;
	readonly longRun: {
		readonly drivers: readonly string[];
		readonly constant: boolean;
		readonly trend: boolean;
	};
	readonly shortRun: {
		/** Lags of the change of the dependent variable, from 1. */
		readonly own: readonly number[];
		/** Lags of the change of each driver, from 0; a driver here need not be in the long run. */
		readonly drivers: readonly { readonly series: string; readonly lags: readonly number[] }[];
		readonly constant: boolean;
	};
	readonly dummies: readonly Dummy[];
	/** Coefficients imposed on a term, named as in the output: `y.l1`, `d.x.l0`. */
	readonly fixed: readonly FixedCoefficient[];
}

/** A deterministic column of the whole sample; a seasonal pattern is one dummy a period of the year. */
export interface Dummy {
	readonly name: string;
	readonly kind: 'pulse' | 'step' | 'seasonal';
	readonly values: Float64Array;
	/** `long`: part of the relation in levels; `short`: moves the change only. */
	readonly in: 'short' | 'long' | 'both';
}

export interface FixedCoefficient {
	readonly term: string;
	readonly value: number;
}

/** The complete sample of an equation: period t is element t - 1 of every series. */
export interface Sample {
	readonly T: number;
	readonly series: ReadonlyMap<string, Float64Array>;
}

/** A relation in levels, y = constant + trend t + slopes x + dummies + gap. */
export interface Relation {
	readonly constant: number;
	readonly trend: number;
	readonly slopes: readonly { readonly series: string; readonly value: number }[];
	readonly dummies: readonly { readonly name: string; readonly value: number }[];
}

export const longRunDummies = (equation: Equation): readonly Dummy[] =>
	equation.dummies.filter((dummy) => dummy.in !== 'short');

export const shortRunDummies = (equation: Equation): readonly Dummy[] =>
	equation.dummies.filter((dummy) => dummy.in !== 'long');
