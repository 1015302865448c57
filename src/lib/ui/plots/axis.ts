/** Ticks of the plots: round values up the side, years along the time axis. */
import type { ScaleLinear } from 'd3-scale';
import { formatNumber } from '../format';

export interface Tick {
	readonly at: number;
	readonly label: string;
}

/** Round values of a scale, all with the same decimals. */
export function valueTicks(scale: ScaleLinear<number, number>, count = 4): readonly Tick[] {
	const values = scale.ticks(count);
	const [first = 0, second = 1] = values;
	const step = Math.abs(second - first) || 1;
	const decimals = Math.max(0, -Math.floor(Math.log10(step) + 1e-9));
	return values.map((value) => ({ at: scale(value), label: formatNumber(value, { decimals }) }));
}

const YEAR_STEPS = [1, 2, 4, 5, 10, 20, 25, 50, 100];

/** Years that open within the periods, at most about `count` of them, by their position in the list. */
export function yearTicks(
	periods: readonly string[],
	count = 6
): readonly { index: number; label: string }[] {
	const opens = periods
		.map((period, index) => ({ index, year: Number(period.slice(0, 4)), part: period.slice(5) }))
		.filter(({ part }) => part === '' || part === 'Q1' || part === '01');
	const step = YEAR_STEPS.find((years) => opens.length / years <= count) ?? 100;
	const ticks = opens.filter(({ year }) => year % step === 0);
	return (ticks.length > 0 ? ticks : opens.slice(0, 1)).map(({ index, year }) => ({
		index,
		label: String(year)
	}));
}

/** Room to the left of the axis for these labels. */
export function labelRoom(ticks: readonly Tick[]): number {
	return Math.max(...ticks.map(({ label }) => label.length), 1) * 7.2 + 12;
}
