/** Paths of series by position in time; a missing value breaks the line. */
import { area, line } from 'd3-shape';

export type Value = number | null;
type Place = (value: number) => number;

const known = (value: Value): value is number => value !== null;

/** One digit after the point: a tenth of a pixel. */
const DIGITS = 1;

/** A line through values at positions 0, 1, 2, … */
export function linePath(values: readonly Value[], x: Place, y: Place): string {
	const shape = line<Value>()
		.defined(known)
		.x((_, i) => x(i))
		.y((value) => y(value ?? 0))
		.digits(DIGITS);
	return shape([...values]) ?? '';
}

/** The area between two series at the same positions. */
export function bandPath(one: readonly Value[], other: readonly Value[], x: Place, y: Place): string {
	const shape = area<Value>()
		.defined((value, i) => known(value) && known(other[i] ?? null))
		.x((_, i) => x(i))
		.y0((_, i) => y(other[i] ?? 0))
		.y1((value) => y(value ?? 0))
		.digits(DIGITS);
	return shape([...one]) ?? '';
}

/** The same line with time running down: values across, positions downwards. */
export function downLinePath(values: readonly Value[], x: Place, y: Place): string {
	const shape = line<Value>()
		.defined(known)
		.x((value) => x(value ?? 0))
		.y((_, i) => y(i))
		.digits(DIGITS);
	return shape([...values]) ?? '';
}

/** The area between a line that runs down and the vertical of zero. */
export function downBandPath(values: readonly Value[], x: Place, y: Place): string {
	const shape = area<Value>()
		.defined(known)
		.y((_, i) => y(i))
		.x0(x(0))
		.x1((value) => x(value ?? 0))
		.digits(DIGITS);
	return shape([...values]) ?? '';
}

/** Least and largest of everything that must be shown. */
export function extent(...series: readonly (readonly Value[])[]): [number, number] {
	const values = series.flat().filter(known);
	if (values.length === 0) return [0, 1];
	const low = Math.min(...values);
	const high = Math.max(...values);
	return low === high ? [low - 1, high + 1] : [low, high];
}

/** Moves labels apart so that none covers another, keeping their order; positions grow downwards. */
export function spread(positions: readonly number[], least: number): readonly number[] {
	const order = positions.map((at, index) => ({ at, index })).sort((a, b) => a.at - b.at);
	let floor = -Infinity;
	for (const label of order) {
		label.at = Math.max(label.at, floor);
		floor = label.at + least;
	}
	const moved = positions.map(() => 0);
	for (const { at, index } of order) moved[index] = at;
	return moved;
}
