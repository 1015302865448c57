import { difference } from '../series/lags';
import type { Deterministic } from './mackinnon';

/** The pieces of a Dickey-Fuller regression of dv(i) on deterministic terms, v(i) and lags of dv. */
export interface AdfRegression {
	readonly y: Float64Array;
	readonly deterministic: readonly Column[];
	readonly level: Column;
	/** Lag 1 first. */
	readonly lags: readonly Column[];
}

interface Column {
	readonly name: string;
	readonly values: Float64Array;
}

/**
 * The regression with `lags` lags on the rows that have at least `from` of them (from >= lags puts several lag
 * orders on one common sample). The trend counts observations of the whole series from 1.
 */
export function adfRegression(
	v: Float64Array,
	det: Deterministic,
	lags: number,
	from: number
): AdfRegression {
	const z = difference(v);
	const rows = z.length - from;
	const column = (name: string, value: (i: number) => number): Column => {
		const values = new Float64Array(rows);
		for (let r = 0; r < rows; r++) values[r] = value(from + r);
		return { name, values };
	};
	const deterministic: Column[] = [];
	if (det !== 'n') deterministic.push(column('const', () => 1));
	if (det === 'ct' || det === 'ctt') deterministic.push(column('trend', (i) => i + 2));
	if (det === 'ctt') deterministic.push(column('trend squared', (i) => (i + 2) ** 2));
	return {
		y: z.slice(from),
		deterministic,
		level: column('level', (i) => v[i]!),
		lags: Array.from({ length: lags }, (_, l) => column(`lag ${l + 1}`, (i) => z[i - l - 1]!))
	};
}
