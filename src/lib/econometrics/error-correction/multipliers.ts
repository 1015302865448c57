import { driverLags, ownLags } from './lag-coefficients';
import type { Coefficients } from './terms';

/**
 * Response of y at 0, 1, .. `horizon` periods to a permanent step of one unit in a driver at 0, everything else
 * held, from an equation in levels. It tends to the long-run slope of the driver when the equation is stable.
 */
export function cumulativeMultipliers(adl: Coefficients, series: string, horizon: number): Float64Array {
	const mu = ownLags(adl);
	const delta = driverLags(adl, series);
	const path = new Float64Array(horizon + 1);
	let arrived = 0;
	for (let h = 0; h <= horizon; h++) {
		arrived += delta[h] ?? 0;
		let value = arrived;
		for (let i = 1; i <= Math.min(h, mu.length); i++) value += mu[i - 1]! * path[h - i]!;
		path[h] = value;
	}
	return path;
}

/** Response of y at 0, 1, .. `horizon` periods to one unit of the error at 0, from mu(1), mu(2), .. */
export function shockResponse(mu: Float64Array, horizon: number): Float64Array {
	const psi = new Float64Array(horizon + 1);
	psi[0] = 1;
	for (let h = 1; h <= horizon; h++) {
		for (let i = 1; i <= Math.min(h, mu.length); i++) psi[h]! += mu[i - 1]! * psi[h - i]!;
	}
	return psi;
}
