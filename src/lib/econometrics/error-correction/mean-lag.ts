import { driverLags, ownLags } from './lag-coefficients';
import { cumulativeMultipliers } from './multipliers';
import type { Coefficients } from './terms';

/** How long a driver takes to arrive in the dependent variable. */
export interface DriverDelay {
	/** Average lag weighted by the response; null where the lags of the driver differ in sign. */
	readonly mean: number | null;
	/** First period with at least half of the long-run response; null within the horizon searched. */
	readonly median: number | null;
}

/**
 * Mean and median lag of a driver in an equation in levels: sum l delta(l) / sum delta(l) plus
 * sum i mu(i) / (1 - sum mu(i)). Hendry (1995) Dynamic Econometrics.
 */
export function driverDelay(adl: Coefficients, series: string, horizon = 400): DriverDelay {
	const mu = ownLags(adl);
	const delta = driverLags(adl, series);
	const sum = (v: Float64Array, weight: (i: number) => number) =>
		v.reduce((total, value, i) => total + weight(i) * value, 0);
	const total = sum(delta, () => 1);
	const left = 1 - sum(mu, () => 1);
	const signs = new Set(Array.from(delta, Math.sign).filter((sign) => sign !== 0));
	const mean =
		signs.size !== 1 || left === 0 ? null : sum(delta, (l) => l) / total + sum(mu, (i) => i + 1) / left;
	return Object.freeze({
		mean,
		median: medianLag(cumulativeMultipliers(adl, series, horizon), total / left)
	});
}

/** Share of the long-run response of a driver that has arrived after `horizon` periods. */
export function shareArrived(adl: Coefficients, series: string, horizon: number): number {
	const left = 1 - ownLags(adl).reduce((sum, value) => sum + value, 0);
	const longRun = driverLags(adl, series).reduce((sum, value) => sum + value, 0) / left;
	return cumulativeMultipliers(adl, series, horizon)[horizon]! / longRun;
}

function medianLag(path: Float64Array, longRun: number): number | null {
	const first = path.findIndex((value) => value / longRun >= 0.5);
	return first < 0 ? null : first;
}
