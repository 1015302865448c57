/**
 * Durbin-Watson statistic: squared changes of the residuals over their sum of squares (Durbin & Watson 1950, Biometrika
 * 37, 409-428). Biased towards 2 when a lagged dependent variable is among the regressors: not to be judged there.
 */
export function durbinWatson(resid: Float64Array): number {
	let changes = 0;
	let squares = 0;
	for (let i = 0; i < resid.length; i++) {
		squares += resid[i]! ** 2;
		if (i > 0) changes += (resid[i]! - resid[i - 1]!) ** 2;
	}
	return changes / squares;
}
