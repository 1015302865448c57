export type DecimalMark = '.' | ',';

/** How a number was written, where that deserves a note. */
export type NumberFlag = 'groups' | 'minus-sign' | 'underflow' | 'many-digits';

export type NumberFault = 'number' | 'mark' | 'digits' | 'not-finite' | 'overflow';

export type NumberReading =
	| { readonly kind: 'missing' }
	| { readonly kind: 'value'; readonly value: number; readonly flags: readonly NumberFlag[] }
	| { readonly kind: 'fault'; readonly code: NumberFault };

const missing: ReadonlySet<string> = new Set([
	'',
	'na',
	'nan',
	'-nan',
	'.',
	'#n/a',
	'-',
	'1.#ind',
	'-1.#ind',
	'1.#qnan'
]);

/** Spaces, no-break and thin spaces, apostrophes: separators of thousands that can be nothing else. */
const spacers = /[ \u00a0\u2007\u2009\u202f'\u2019]/;

const infinite = /^[+-]?(?:inf(?:inity)?|∞|1\.#inf)$/i;

/** Takes the separators of thousands out where every group has three digits; undefined where they do not fit. */
const ungroup = (text: string, separator: string): string | undefined => {
	const cut = text.search(/[^\d+\-,.'\u2019 \u00a0\u2007\u2009\u202f]/);
	const mantissa = cut === -1 ? text : text.slice(0, cut);
	const groups = mantissa.split(separator);
	const last = groups.at(-1) ?? '';
	const fits = groups.every((group, i) => {
		if (i === 0) return /^[+-]?\d{1,3}$/.test(group);
		return i === groups.length - 1 ? /^\d{3}(?:[.,]\d*)?$/.test(last) : /^\d{3}$/.test(group);
	});
	return fits ? groups.join('') + (cut === -1 ? '' : text.slice(cut)) : undefined;
};

/** No figure with a mark is longer; the patterns below are not for text of any length. */
const longestMarked = 64;

const marked = (text: string, mark: DecimalMark): boolean => {
	if (text.length > longestMarked) return false;
	const bare = text
		.replace(/^(?:\p{Sc}|[A-Z]{3}|[<>~≈])\s*/u, '')
		.replace(/\s*(?:[%‰*†‡°§#¹²³]{1,3}|\p{Sc}|[A-Za-z]{1,3}|\([A-Za-z*]{1,3}\)|\[[A-Za-z\d]{1,3}\])$/u, '');
	return bare !== text && bare !== '' && readNumber(bare, mark).kind === 'value';
};

const significantDigits = (mantissa: string): number =>
	mantissa.replace(/[^\d]/g, '').replace(/^0+/, '').length;

const core = /^([+-]?)(\d*)(?:\.(\d*))?(?:[eE]([+-]?\d{1,6}))?$/;

const fault = (code: NumberFault): NumberReading => ({ kind: 'fault', code });

/** Nearly every cell of nearly every file: digits, one point at most, no more than a double holds. */
const plain = /^-?(?=[\d.]{1,18}$)\d{1,17}(?:\.\d+)?$/;

/**
 * Reads one cell of text as a number with the given decimal mark. Empty, NA, NaN, `.`, `#N/A` and `-` are missing,
 * never zero; thousands may be grouped by spaces, apostrophes or the other mark where groups of three fit; percent and
 * currency signs, letters and footnote marks are refused, because a unit belongs to the series and not to a cell.
 */
export const readNumber = (cell: string, mark: DecimalMark): NumberReading => {
	if (mark === '.' && plain.test(cell)) {
		const value = Number(cell);
		return { kind: 'value', value: value === 0 ? 0 : value, flags: [] };
	}
	const trimmed = cell.trim();
	if (missing.has(trimmed.toLowerCase())) return { kind: 'missing' };
	const flags: NumberFlag[] = [];
	let text = trimmed;
	if (text.includes('\u2212')) {
		text = text.replaceAll('\u2212', '-');
		flags.push('minus-sign');
	}
	if (infinite.test(text)) return fault('not-finite');
	if (/[^\P{Nd}0-9]/u.test(text)) return fault('digits');
	const grouped = [spacers.exec(text)?.[0], mark === ',' ? '.' : ','].find(
		(s) => s !== undefined && text.includes(s)
	);
	if (grouped !== undefined) {
		const plain = ungroup(text, grouped);
		if (plain !== undefined) {
			text = plain;
			flags.push('groups');
		}
	}
	const other = mark === ',' ? '.' : ',';
	const parts = text.includes(other) ? null : core.exec(text.replace(mark, '.'));
	if (!parts || (!parts[2] && !parts[3])) return fault(marked(trimmed, mark) ? 'mark' : 'number');
	const value = Number(`${parts[1]}${parts[2] || '0'}.${parts[3] || '0'}e${parts[4] ?? '0'}`);
	const digits = significantDigits(`${parts[2] ?? ''}${parts[3] ?? ''}`);
	if (!Number.isFinite(value)) return fault('overflow');
	if (value === 0 && digits > 0) flags.push('underflow');
	else if (digits > 17) flags.push('many-digits');
	return { kind: 'value', value: value === 0 ? 0 : value, flags };
};

/**
 * What a cell says about the decimal mark: `.` and `,` are decisive; `thousand-or-point` (1,234) and `point-or-thousand`
 * (1.234) can be read either way; undefined says nothing.
 */
export type MarkEvidence = '.' | ',' | 'thousand-or-point' | 'point-or-thousand';

export const markEvidence = (cell: string): MarkEvidence | undefined => {
	const text = cell
		.trim()
		.replace(/^[+\-\u2212]/, '')
		.replace(/[eE][+-]?\d+$/, '');
	if (!/^[\d.,]*\d[\d.,]*$/.test(text)) return undefined;
	const dots = text.split('.').length - 1;
	const commas = text.split(',').length - 1;
	if (dots > 0 && commas > 0) {
		if (/^\d{1,3}(?:,\d{3})+\.\d*$/.test(text)) return '.';
		return /^\d{1,3}(?:\.\d{3})+,\d*$/.test(text) ? ',' : undefined;
	}
	if (commas === 1) return /^[1-9]\d{0,2},\d{3}$/.test(text) ? 'thousand-or-point' : ',';
	if (commas > 1) return /^\d{1,3}(?:,\d{3})+$/.test(text) ? '.' : undefined;
	if (dots === 1) return /^[1-9]\d{0,2}\.\d{3}$/.test(text) ? 'point-or-thousand' : '.';
	return dots > 1 && /^\d{1,3}(?:\.\d{3})+$/.test(text) ? ',' : undefined;
};
