/** The room a plot is drawn in: outer size and the inner rectangle of its axes, in units of its viewBox. */
export interface Box {
	readonly width: number;
	readonly height: number;
	readonly left: number;
	readonly right: number;
	readonly top: number;
	readonly bottom: number;
	/** Drawn for a phone: fewer ticks, keys instead of labels at line ends. */
	readonly narrow: boolean;
	readonly size: PlotSize;
}

export interface Margins {
	readonly left: number;
	readonly right: number;
	readonly top: number;
	readonly bottom: number;
}

export type PlotSize = 'full' | 'half' | 'tall';

/** Width and height on a wide and on a narrow screen; a phone is drawn at its own width, so that letters stay 12 px. */
const SIZES: Readonly<
	Record<PlotSize, { wide: readonly [number, number]; narrow: readonly [number, number] }>
> = {
	full: { wide: [760, 372], narrow: [358, 300] },
	half: { wide: [490, 240], narrow: [358, 220] },
	tall: { wide: [252, 372], narrow: [252, 330] }
};

/** The box of a plot of this size with room for its labels. */
export function boxOf(size: PlotSize, narrow: boolean, margins: Margins): Box {
	const [width, height] = SIZES[size][narrow ? 'narrow' : 'wide'];
	return {
		width,
		height,
		left: margins.left,
		right: width - margins.right,
		top: margins.top,
		bottom: height - margins.bottom,
		narrow,
		size
	};
}

/** Width of a text in the plots' fixed-width face at 12 px. */
export function textWidth(text: string): number {
	return text.length * 7.2;
}
