import type { Reason } from '$lib/domain/run';

/** The null hypotheses of results, in words. */
export const nullWords: Readonly<Record<string, string>> = Object.freeze({
	'unit-root': 'the series has a unit root',
	stationary: 'the series is stationary',
	'no-cointegration': 'the levels do not cointegrate',
	'no-adjustment': 'the speed of adjustment is zero: no relation in levels',
	'no-level-relation': 'the levels have no relation',
	'speed-zero': 'the speed of adjustment is zero, against a positive one',
	'slope-zero': 'the long-run slope is zero',
	'unit-root-in-gap': 'the gap has a unit root',
	'no-autocorrelation': 'the residuals are not autocorrelated',
	'no-arch': 'the variance does not depend on its own past',
	'equal-variance': 'the variance does not depend on the regressors',
	normal: 'the residuals are normal',
	linear: 'the equation is linear in its regressors',
	'constant-coefficients': 'the coefficients are constant',
	'constant-variance': 'the error variance is constant',
	'no-break': 'the coefficients do not break at any date'
});

/** Why something was not assessed, in words that begin a sentence. */
export const reasonWords: Readonly<Record<Reason, string>> = Object.freeze({
	'non-finite': 'a value is not a finite number',
	domain: 'a value lies outside what the computation is defined for',
	gap: 'a period is missing',
	duplicate: 'a period appears twice',
	frequency: 'the periods are not of one frequency',
	constant: 'a series does not vary',
	'too-short': 'there are too few observations',
	rank: 'regressors are linear combinations of each other',
	'perfect-fit': 'the regressors reproduce the dependent variable exactly',
	'empty-trim': 'no break date is left after trimming',
	'first-rows': 'the first rows do not determine the coefficients',
	'no-variance': 'a variance is not positive',
	lag: 'the lags do not fit the sample',
	table: 'no critical value exists for this design',
	'no-scenario': 'no scenario is attached',
	'not-observable': 'there is nothing to observe',
	'needs-cointegration': 'cointegration is not shown',
	'no-approved-version': 'there is no approved version',
	'no-horizon': 'the use states no horizon',
	given: 'coefficients were given, not estimated'
});

/** Rules that changed a plain reading, as sentences. */
export const becauseWords: Readonly<Record<string, string>> = Object.freeze({
	'critical-and-p-differ':
		'Critical value and asymptotic p-value fall on different sides of the level; both are shown and neither is picked.',
	'does-not-correct': 'The estimated speed does not correct: it is 0 or less, or 2 or more.',
	'opposite-null-rejected': 'A test of the opposite null rejects at 1 %.',
	'boundary-crossed': 'The cumulated gap of the new periods has crossed its boundary.',
	'engle-granger-disagrees': 'Engle-Granger reads otherwise; each keeps its own verdict.',
	'between-bounds': 'The statistic lies between the bounds: inconclusive.',
	'autocorrelated-residuals':
		'The residuals are autocorrelated, which makes this p-value unreliable: at best a query.',
	'robust-errors': 'The model’s standard errors allow for it.',
	'small-sample-guide': 'In a sample of this size the distribution is only a guide.',
	'overlapping-targets':
		'The dependent variable spans several periods, so its errors overlap; only lags beyond the span are judged.',
	'too-fast': 'The half-life is shorter than the policy’s range.',
	'too-slow': 'The half-life is longer than the policy’s range.',
	'long-run-not-determined': 'The speed is too uncertain to determine the long run.',
	'variance-rose': 'The path runs below its band: the variance rose over the sample.',
	'variance-fell': 'The path runs above its band: the variance fell over the sample.',
	'cusum-holds': 'The CUSUM itself stays inside its boundary, so this is a query.',
	'sample-shortened': 'The data cover less than the sample of the specification.'
});

/** Short titles of the checks, as lists show them. */
export const checkTitles: Readonly<Record<string, string>> = Object.freeze({
	'data.integrity': 'Series integrity',
	'integration.adf': 'Dickey-Fuller',
	'integration.kpss': 'KPSS',
	'integration.order': 'Order of integration',
	'cointegration.engle-granger': 'Engle-Granger',
	'cointegration.ecm-t': 'ECM t',
	'cointegration.bounds': 'Bounds',
	'adjustment.sign': 'Speed of adjustment',
	'adjustment.significance': 'Significance of the speed',
	'adjustment.half-life': 'Half-life',
	'long-run.signs': 'Long-run signs',
	'long-run.range': 'Long-run ranges',
	'long-run.precision': 'Long-run precision',
	'replication.coefficients': 'Claimed coefficients',
	'residual.stationarity-refit': 'Stationarity of the gap, re-estimated',
	'residual.stationarity-held': 'Stationarity of the gap, values held',
	'residual.autocorrelation': 'Autocorrelation, Breusch-Godfrey',
	'residual.portmanteau': 'Autocorrelation, Ljung-Box',
	'residual.arch': 'ARCH',
	'residual.heteroskedasticity': 'Heteroskedasticity',
	'residual.normality': 'Normality',
	'residual.functional-form': 'Functional form, RESET',
	'design.collinearity': 'Collinearity',
	'design.degrees': 'Observations for each coefficient',
	'stability.cusum': 'CUSUM',
	'stability.cusumsq': 'CUSUM of squares',
	'stability.sup-f': 'Break at an unknown date, sup-F',
	'family.false-alarms': 'False alarms to expect'
});

/** Titles of the groups. */
export const groupTitles: Readonly<Record<string, string>> = Object.freeze({
	data: 'Data',
	integration: 'Order of integration',
	cointegration: 'Cointegration',
	adjustment: 'Adjustment',
	'long-run': 'Long run',
	replication: 'Replication',
	residual: 'Residuals',
	design: 'Design',
	stability: 'Stability',
	family: 'Family of checks'
});
