/** Sentences computed from estimates: they claim an association, at three significant digits, and judge nothing. */
import type { Frequency } from '$lib/domain/period';
import { formatNumber, formatPercent, formatSignificant, NO_BREAK } from './format';

/** The noun for one period of a frequency, and for several. */
const PERIOD_NOUN: Readonly<Record<Frequency, readonly [one: string, many: string]>> = {
	annual: ['year', 'years'],
	quarterly: ['quarter', 'quarters'],
	monthly: ['month', 'months']
};

/** How a series is measured where the equation uses it. */
export interface Measure {
	/** The name people say: `unemployment`. */
	readonly name: string;
	/** `log` of a level, `points` when already in per cent, else `units` of something. */
	readonly kind: 'log' | 'points' | 'units';
	/** The unit of a `units` measure: `EUR m`; absent where a transform left none. */
	readonly unit?: string;
}

export interface Adjustment {
	/** Share of the gap closed in one period, lambda = minus the coefficient on the gap. */
	readonly speed: number;
	/** Periods until half of a shock is gone; null when it does not die out. */
	readonly halfLife: number | null;
	readonly frequency: Frequency;
}

/** Speed of adjustment and half-life in words. */
export function adjustmentSentence({ speed, halfLife, frequency }: Adjustment): string {
	const [one, many] = PERIOD_NOUN[frequency];
	if (speed <= 0) {
		const coefficient = formatSignificant(-speed, 3, true);
		return `The coefficient on the equilibrium error (gap) is ${coefficient}, so the gap is not closed and there is no half-life.`;
	}
	const share = `Speed of adjustment: ${formatPercent(speed)} of the equilibrium error (gap) in a ${one}`;
	const half = halfLife === null ? 'no half-life: a shock does not die out' : halfLifeOf(halfLife, many);
	return speed > 1 ? `${share}, so it is overshot; ${half}.` : `${share}; ${half}.`;
}

function halfLifeOf(periods: number, many: string): string {
	return `half-life of a shock ${formatSignificant(periods)}${NO_BREAK}${many}`;
}

function stepOf(driver: Measure): string {
	if (driver.kind === 'log') return `1${NO_BREAK}% more ${driver.name}`;
	if (driver.kind === 'points') return `One percentage point more ${driver.name}`;
	return `One unit${driver.unit ? ` (${driver.unit})` : ''} more ${driver.name}`;
}

/** The change of the dependent series for one step of the driver: `0.500 percentage point`, `0.951 %`. */
function effectOf(driver: Measure, dependent: Measure, coefficient: number): { size: number; words: string } {
	const perStep = driver.kind === 'log' ? coefficient / 100 : coefficient;
	if (dependent.kind === 'log') {
		// log on log is an elasticity; log on a level is exact as exp(b) - 1.
		const percent = driver.kind === 'log' ? coefficient : 100 * Math.expm1(coefficient);
		return { size: percent, words: `${formatSignificant(Math.abs(percent))}${NO_BREAK}%` };
	}
	const unit = dependent.kind === 'points' ? pointsWord(perStep) : (dependent.unit ?? 'units');
	return { size: perStep, words: `${formatSignificant(Math.abs(perStep))} ${unit}` };
}

function pointsWord(value: number): string {
	return Math.abs(value) > 1 ? 'percentage points' : 'percentage point';
}

/** One long-run slope in words: more of the driver is associated with more or less of the dependent series. */
export function longRunSentence(driver: Measure, dependent: Measure, coefficient: number): string {
	const { size, words } = effectOf(driver, dependent, coefficient);
	if (size === 0)
		return `${stepOf(driver)} is associated with no change of ${dependent.name} in the long run.`;
	const direction = size > 0 ? 'more' : 'less';
	return `${stepOf(driver)} is associated with ${words} ${direction} ${dependent.name} in the long run.`;
}

export interface Gap {
	readonly period: string;
	readonly dependent: Measure;
	/** Observed minus long run, in the units of the equation. */
	readonly gap: number;
	/** Standard deviation of the gap over the sample, same units. */
	readonly sd: number;
}

/** Where the last period stands; `marked` is the phrase to highlight. */
export function gapSentence({ period, dependent, gap, sd }: Gap): {
	lead: string;
	marked: string;
	text: string;
} {
	const side = gap > 0 ? 'above' : 'below';
	const lead = `In ${period} ${dependent.name} stood `;
	const distance = `${formatNumber(Math.abs(gap) / sd, { decimals: 1 })} s.d. of the gap`;
	const marked =
		gap === 0 ? 'on its long run' : `${gapSize(gap, dependent)} ${side} its long run, ${distance}`;
	return { lead, marked, text: `${lead}${marked}.` };
}

function gapSize(gap: number, dependent: Measure): string {
	if (dependent.kind === 'log') return `${formatSignificant(Math.abs(100 * Math.expm1(gap)))}${NO_BREAK}%`;
	const unit = dependent.kind === 'points' ? pointsWord(gap) : (dependent.unit ?? 'units');
	return `${formatSignificant(Math.abs(gap))} ${unit}`;
}
