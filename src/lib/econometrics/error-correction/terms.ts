/**
 * One regressor of an equation, as data: a series may be called `y` or contain dots, so names are built from
 * terms and never read back.
 */
export type Term =
	| { readonly kind: 'constant' }
	| { readonly kind: 'trend' }
	| { readonly kind: 'dummy'; readonly name: string }
	/** A dummy of the long run, one period back like the levels beside it. */
	| { readonly kind: 'level-dummy'; readonly name: string }
	| { readonly kind: 'own-level'; readonly lag: number }
	| { readonly kind: 'driver-level'; readonly series: string; readonly lag: number }
	| { readonly kind: 'gap' }
	| { readonly kind: 'own-change'; readonly lag: number }
	| { readonly kind: 'driver-change'; readonly series: string; readonly lag: number };

/** The name of a regressor in results. */
export function termName(term: Term): string {
	switch (term.kind) {
		case 'constant':
			return 'const';
		case 'trend':
			return 'trend';
		case 'dummy':
			return term.name;
		case 'level-dummy':
			return `${term.name}.l1`;
		case 'own-level':
			return `y.l${term.lag}`;
		case 'driver-level':
			return `${term.series}.l${term.lag}`;
		case 'gap':
			return 'ec.l1';
		case 'own-change':
			return `d.y.l${term.lag}`;
		case 'driver-change':
			return `d.${term.series}.l${term.lag}`;
	}
}

/** Coefficients of an equation, estimated or given, with the imposed ones among them. */
export interface Coefficients {
	readonly terms: readonly Term[];
	readonly values: Float64Array;
	/** Column-major, bordered by zeros for imposed coefficients; null where none is known. */
	readonly covariance: Float64Array | null;
	/** Degrees of freedom of the residual variance: rows less free coefficients. */
	readonly df: number;
}

/** Position of the first term that satisfies `test`, or -1. */
export const indexOf = (coefficients: Coefficients, test: (term: Term) => boolean): number =>
	coefficients.terms.findIndex(test);

/** Value of the first term that satisfies `test`, 0 where the equation has none. */
export function valueOf(coefficients: Coefficients, test: (term: Term) => boolean): number {
	const at = indexOf(coefficients, test);
	return at < 0 ? 0 : coefficients.values[at]!;
}

/** Covariance entry of two positions; 0 where either is absent (-1). */
export function covarianceAt(coefficients: Coefficients, i: number, j: number): number {
	const { covariance, terms } = coefficients;
	return covariance === null || i < 0 || j < 0 ? 0 : covariance[j * terms.length + i]!;
}
