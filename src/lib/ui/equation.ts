/** What the typeset error-correction equation shows, and the same as one line of text for screen readers. */
import { formatNumber, MINUS } from './format';

export interface Coefficient {
	/** Absent while nothing is estimated: a Greek letter stands instead. */
	readonly value?: number;
	readonly se?: number;
	/** Imposed, not estimated. */
	readonly fixed?: boolean;
}

export interface EquationTerm {
	readonly series: string;
	/** 0 is the same period. */
	readonly lag: number;
	readonly kind: 'difference' | 'level' | 'dummy';
	readonly coefficient: Coefficient;
}

export interface LongRunView {
	readonly constant?: Coefficient;
	readonly trend?: Coefficient;
	readonly terms: readonly { readonly series: string; readonly coefficient: Coefficient }[];
}

export interface EquationView {
	readonly dependent: string;
	readonly constant?: Coefficient;
	readonly shortRun: readonly EquationTerm[];
	/** Coefficient on the gap, minus the speed of adjustment; absent while there is no gap. */
	readonly speed?: Coefficient;
	readonly longRun?: LongRunView;
}

/** One addend ready to set: its sign, its size or letter, what stands under it, and its variable. */
export interface Piece {
	readonly sign: '+' | '−' | '';
	readonly size: string;
	/** Index of a Greek letter; empty for a number. */
	readonly index: string;
	/** Standard error in brackets, or `fixed`. */
	readonly under: string;
	readonly variable: Variable | null;
}

export interface Variable {
	readonly difference: boolean;
	readonly name: string;
	/** `t`, `t−1`; empty for a dummy. */
	readonly time: string;
}

export interface EquationPieces {
	readonly left: Variable;
	readonly shortRun: readonly Piece[];
	readonly speed: Piece | null;
	readonly gap: { readonly level: Variable; readonly minus: readonly Piece[] } | null;
}

/** The time index of a variable so many periods back. */
export function timeIndex(lag: number): string {
	return lag === 0 ? 't' : `t${MINUS}${lag}`;
}

interface Setting {
	readonly coefficient: Coefficient;
	readonly letter: string;
	readonly index?: string;
	readonly variable?: Variable;
	/** Subtracted in the equation: its sign is turned. */
	readonly subtracted?: boolean;
	readonly decimals: number;
}

function pieceOf({
	coefficient,
	letter,
	index = '',
	variable,
	subtracted = false,
	decimals
}: Setting): Piece {
	const { value, se, fixed } = coefficient;
	const under = fixed ? 'fixed' : se === undefined ? '' : `(${formatNumber(se, { decimals })})`;
	if (value === undefined) {
		return { sign: subtracted ? MINUS : '+', size: letter, index, under, variable: variable ?? null };
	}
	const negative = subtracted ? value >= 0 : value < 0;
	const size = formatNumber(Math.abs(value), { decimals });
	return { sign: negative ? MINUS : '+', size, index: '', under, variable: variable ?? null };
}

function shortRunPieces(view: EquationView, decimals: number): Piece[] {
	const counted = { dummy: 0, other: 0 };
	const pieces = view.shortRun.map((term) =>
		pieceOf({
			coefficient: term.coefficient,
			letter: term.kind === 'dummy' ? 'δ' : 'γ',
			index: String(++counted[term.kind === 'dummy' ? 'dummy' : 'other']),
			variable: {
				difference: term.kind === 'difference',
				name: term.series,
				time: term.kind === 'dummy' ? '' : timeIndex(term.lag)
			},
			decimals
		})
	);
	if (view.constant) pieces.unshift(pieceOf({ coefficient: view.constant, letter: 'μ', decimals }));
	// The equation opens with its first term: a plus there is not written.
	return pieces.map((piece, i) => (i === 0 && piece.sign === '+' ? { ...piece, sign: '' } : piece));
}

function gapPieces(longRun: LongRunView, decimals: number): Piece[] {
	const setting = { subtracted: true, decimals };
	const pieces = longRun.terms.map(({ series, coefficient }, i) => {
		const variable = { difference: false, name: series, time: timeIndex(1) };
		return pieceOf({ ...setting, coefficient, letter: 'β', index: String(i + 1), variable });
	});
	if (longRun.trend) {
		const variable = { difference: false, name: 'trend', time: timeIndex(1) };
		pieces.unshift(pieceOf({ ...setting, coefficient: longRun.trend, letter: 'τ', variable }));
	}
	if (longRun.constant) pieces.unshift(pieceOf({ ...setting, coefficient: longRun.constant, letter: 'c' }));
	return pieces;
}

/** Cuts an equation into addends with signs turned into operators. */
export function equationPieces(view: EquationView, decimals = 3): EquationPieces {
	// The letter lambda is the speed itself: it stands with a minus before it.
	const speed = view.speed && pieceOf({ coefficient: view.speed, letter: 'λ', decimals });
	return {
		left: { difference: true, name: view.dependent, time: 't' },
		shortRun: shortRunPieces(view, decimals),
		speed: speed ? { ...speed, sign: view.speed?.value === undefined ? MINUS : speed.sign } : null,
		gap: view.longRun
			? {
					level: { difference: false, name: view.dependent, time: timeIndex(1) },
					minus: gapPieces(view.longRun, decimals)
				}
			: null
	};
}

function variableText({ difference, name, time }: Variable): string {
	return `${difference ? 'Δ' : ''}${name}${time ? `(${time})` : ''}`;
}

function pieceText({ sign, size, index, under, variable }: Piece): string {
	const figure = `${size}${index} ${under}`.trim();
	return `${sign ? `${sign} ` : ''}${figure}${variable ? ` ${variableText(variable)}` : ''}`;
}

/** The equation as one line, standard errors in brackets after their coefficient. */
export function equationText(view: EquationView, decimals = 3): string {
	const { left, shortRun, speed, gap } = equationPieces(view, decimals);
	const parts = shortRun.map(pieceText);
	if (speed) parts.push(pieceText(speed));
	if (gap) parts.push(`[ ${[variableText(gap.level), ...gap.minus.map(pieceText)].join(' ')} ]`);
	return `${variableText(left)} = ${parts.length > 0 ? parts.join(' ') : '…'}`;
}
