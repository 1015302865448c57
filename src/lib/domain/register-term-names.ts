import { termsOf, type SpecificationTerm } from './specification-terms';
import type { Specification } from './specification';

/** A term with the name people read: `Δunemp(t−1)`, `gap(t−1)`, `unemp, long run`. */
export interface NamedTerm {
	readonly code: string;
	readonly name: string;
}

const at = (lag: number): string => (lag === 0 ? '(t)' : `(t\u2212${lag})`);

/** The name of a term on screens and in messages. */
export const termName = (term: SpecificationTerm): string => {
	if (term.part === 'long') {
		if (term.kind === 'constant') return 'constant, long run';
		if (term.kind === 'trend') return 'trend, long run';
		return `${term.series}, long run`;
	}
	switch (term.kind) {
		case 'constant':
			return 'constant';
		case 'trend':
			return 'trend';
		case 'gap':
			return `gap${at(term.lag)}`;
		case 'dummy':
			return term.series!;
		case 'difference':
			return `Δ${term.series}${at(term.lag)}`;
		case 'level':
			return `${term.series}${at(term.lag)}`;
	}
};

/** Every term a coefficient can be claimed for, with its name, in the order of the equation. */
export const namedTerms = (specification: Specification): readonly NamedTerm[] =>
	termsOf(specification).map((term) => ({ code: term.code, name: termName(term) }));

const folds: readonly (readonly [RegExp, string])[] = [
	[/[\u2010-\u2015\u2212\ufe63\uff0d]/g, '-'],
	[/[{}$\\]/g, ''],
	[/\[/g, '('],
	[/\]/g, ')'],
	// The lag, before blanks go: `(t - 1)`, `_t-1`, ` t-1`, `(-1)`; the current period carries no index.
	[/[\s_]*(?:\(\s*|[\s_])t\s*-\s*(\d+)\s*\)?$/, '(t-$1)'],
	[/\(\s*-\s*(\d+)\s*\)$/, '(t-$1)'],
	[/(?:_t|\(\s*t\s*\))$/, ''],
	[/\s/g, ''],
	[/^(?:[\u0394\u2206]|delta[_-]?|d_)/iu, 'd.']
];

const subscripts = /[\u2080-\u2089\u208b\u209c]+/g;
const plain = (mark: string): string =>
	mark === '\u209c' ? 't' : mark === '\u208b' ? '-' : String(mark.charCodeAt(0) - 0x2080);

/** One spelling for all the ways a term is typeset: subscripts, minus signs, Δ, brackets, blanks. */
export const foldTerm = (typed: string): string => {
	const flat = typed.trim().replace(subscripts, (index) => `(${[...index].map(plain).join('')})`);
	// D(x(-1)) and Δ(x) wrap what they difference.
	const unwrapped = flat.replace(/^(?:d|\u0394|\u2206)\((.+)\)$/iu, 'Δ$1');
	return folds.reduce((text, [pattern, by]) => text.replace(pattern, by), unwrapped);
};

/** Spellings under which a term may be written, folded. */
export const spellings = (term: SpecificationTerm): readonly string[] => {
	const names = [term.code, termName(term)];
	if (term.kind === 'gap')
		names.push('gap', 'ec(t-1)', 'ecm(t-1)', 'speed', 'speed of adjustment', 'adjustment');
	if (term.kind === 'constant')
		names.push(...(term.part === 'long' ? ['long-run constant'] : ['intercept', 'c']));
	if (term.part === 'long' && term.series) names.push(`long-run ${term.series}`, `LR ${term.series}`);
	return names.map(foldTerm);
};
