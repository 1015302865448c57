/** How figures, dates and periods are written: U+2212 as minus, a thin space between thousands, ISO dates, UTC times. */
import { daysBetween } from '$lib/domain/calendar';

export const MINUS = '\u2212';
/** Thin space between groups of three digits. */
export const THIN = '\u2009';
/** Space that a line never breaks at, between a figure and its unit. */
export const NO_BREAK = '\u00a0';
/** Stands where a figure does not exist. */
export const NONE = '·';

export interface NumberStyle {
	/** Digits after the point; 3 unless said. */
	readonly decimals?: number;
	/** Write + before what is positive. */
	readonly sign?: boolean;
}

function groupThousands(digits: string): string {
	return digits.replace(/\B(?=(\d{3})+(?!\d))/g, THIN);
}

/** A finite number at a fixed count of decimals; what rounds to zero carries no sign. */
export function formatNumber(value: number, { decimals = 3, sign = false }: NumberStyle = {}): string {
	if (!Number.isFinite(value)) throw new RangeError(`a figure must be finite, not ${value}`);
	const size = Math.abs(value);
	if (size >= 1e15) return scientific(value, decimals);
	const digits = size.toFixed(decimals);
	const [whole = '0', part] = digits.split('.');
	const body = groupThousands(whole) + (part === undefined ? '' : `.${part}`);
	if (Number(digits) === 0) return body;
	if (value < 0) return MINUS + body;
	return sign ? `+${body}` : body;
}

const SUPERSCRIPTS = '⁰¹²³⁴⁵⁶⁷⁸⁹';

function scientific(value: number, decimals: number): string {
	const [mantissa = '0', power = '0'] = value.toExponential(decimals).split('e');
	const exponent = [...String(Math.abs(Number(power)))].map((d) => SUPERSCRIPTS[Number(d)] ?? '').join('');
	return `${mantissa.replace('-', MINUS)}${NO_BREAK}×${NO_BREAK}10${Number(power) < 0 ? '⁻' : ''}${exponent}`;
}

/** A number to so many significant digits, trailing zeros kept (0.5 to three digits is 0.500). */
export function formatSignificant(value: number, digits = 3, sign = false): string {
	if (value === 0) return '0';
	const rounded = Number(value.toPrecision(digits));
	const magnitude = Math.floor(Math.log10(Math.abs(rounded)));
	if (magnitude < -6) return scientific(rounded, digits - 1);
	const decimals = digits - 1 - magnitude;
	// Digits before the point are never rounded away.
	return decimals > 0
		? formatNumber(rounded, { decimals, sign })
		: formatNumber(value, { decimals: 0, sign });
}

/** A p-value to three decimals, `< 0.001` below. */
export function formatP(p: number): string {
	if (!(p >= 0 && p <= 1)) throw new RangeError(`a p-value lies between 0 and 1, not ${p}`);
	return p < 0.001 ? `<${NO_BREAK}0.001` : p.toFixed(3);
}

/** A share as per cent, to three significant digits: 0.3271 is `32.7 %`. */
export function formatPercent(share: number): string {
	return `${formatSignificant(share * 100, 3)}${NO_BREAK}%`;
}

/** A whole number with its thousands apart. */
export function formatCount(count: number): string {
	return formatNumber(count, { decimals: 0 });
}

/** The day of an ISO date or instant. */
export function formatDate(iso: string): string {
	return iso.slice(0, 10);
}

/** An instant in UTC to the minute, zone named. */
export function formatInstant(instant: string | number | Date): string {
	const iso = new Date(instant).toISOString();
	return `${iso.slice(0, 10)} ${iso.slice(11, 16)} UTC`;
}

/** Bytes in the unit a person reads: 812 B, 7.6 MB. */
export function formatBytes(bytes: number): string {
	if (bytes < 1000) return `${bytes}${NO_BREAK}B`;
	if (bytes < 1_000_000) return `${formatNumber(bytes / 1000, { decimals: 1 })}${NO_BREAK}kB`;
	return `${formatNumber(bytes / 1_000_000, { decimals: 1 })}${NO_BREAK}MB`;
}

/** How far a due day lies: `30 days`, `today`, `11 days over`. */
export function formatDue(today: string, due: string): string {
	const days = daysBetween(formatDate(today), formatDate(due));
	if (days === 0) return 'today';
	const word = Math.abs(days) === 1 ? 'day' : 'days';
	return days > 0 ? `${days} ${word}` : `${-days} ${word} over`;
}

/** A count with its noun: `1 result`, `3 results`. */
export function countOf(count: number, one: string, many = `${one}s`): string {
	return `${formatCount(count)} ${count === 1 ? one : many}`;
}
