import { valueOf, type Coefficients, type Term } from './terms';

/** Readings of the coefficients of an equation by lag. */

/** Largest lag among the terms that satisfy `test`, -1 where there is none. */
export const largestLagOf = (terms: readonly Term[], test: (term: Term) => boolean): number =>
	Math.max(-1, ...terms.filter(test).map((term) => ('lag' in term ? term.lag : -1)));

/** Drivers in the order of their first term. */
export function driversOf(terms: readonly Term[]): readonly string[] {
	const names = terms.flatMap((term) =>
		term.kind === 'driver-level' || term.kind === 'driver-change' ? [term.series] : []
	);
	return [...new Set(names)];
}

/** Sum of the own lags of a levels form; one less it is the speed of adjustment. */
export const sumOfOwnLags = (adl: Coefficients): number =>
	adl.terms.reduce((sum, term, i) => (term.kind === 'own-level' ? sum + adl.values[i]! : sum), 0);

/** Autoregressive coefficients mu(1), mu(2), .. of a levels form, dense. */
export function ownLags(adl: Coefficients): Float64Array {
	const last = largestLagOf(adl.terms, (term) => term.kind === 'own-level');
	return Float64Array.from({ length: last }, (_, i) =>
		valueOf(adl, (term) => term.kind === 'own-level' && term.lag === i + 1)
	);
}

/** Coefficients delta(0), delta(1), .. of a driver in a levels form, dense. */
export function driverLags(adl: Coefficients, series: string): Float64Array {
	const of = (lag: number) => (term: Term) =>
		term.kind === 'driver-level' && term.series === series && term.lag === lag;
	const last = largestLagOf(adl.terms, (term) => term.kind === 'driver-level' && term.series === series);
	return Float64Array.from({ length: last + 1 }, (_, l) => valueOf(adl, of(l)));
}
