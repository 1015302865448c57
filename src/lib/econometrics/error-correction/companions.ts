import { engleGranger, type EngleGranger, type ResidualLags } from '../cointegration/engle-granger';
import { isRefusal, type Refusal } from '../refusal';
import { leastSquares } from '../regression/least-squares';
import { ols, type OlsFit } from '../regression/ols';
import { designOf } from '../series/design';
import { equationDesign } from './design';
import { longRunDummies, type Equation, type Sample } from './equation';
import type { ErrorCorrectionFit } from './fit';
import { staticRegression } from './static-regression';

/** The equation without its long run: what the levels must beat. */
export interface DifferencesOnly {
	/** dy on constant, the same dummies and the same lags, on the rows of the equation itself. */
	readonly fit: OlsFit;
	/** F of the long-run terms that the equation adds; its distribution is not that of F unless levels cointegrate. */
	readonly longRunF: { readonly F: number; readonly df1: number; readonly df2: number } | null;
}

/** The regression of the levels alone, and whether its fit means anything. */
export interface LevelsOnly {
	readonly fit: OlsFit;
	readonly engleGranger: EngleGranger | Refusal;
	/** R-squared above the Durbin-Watson statistic, the old sign of a spurious regression. */
	readonly rSquaredAboveDurbinWatson: boolean;
	readonly reading: LevelsReading;
}

export type LevelsReading =
	| 'levels cointegrate'
	| 'levels wander together without cointegrating'
	/** No test of cointegration could be made. */
	| 'not established';

/** Estimates the equation of changes with a constant and no long run, on the same rows. */
export function differencesOnly(equation: Equation, sample: Sample): DifferencesOnly | Refusal {
	const withConstant = { ...equation, shortRun: { ...equation.shortRun, constant: true }, fixed: [] };
	const design = equationDesign(withConstant, sample, 'none');
	if (isRefusal(design)) return design;
	const fit = ols(design.y, design.design);
	if (isRefusal(fit)) return fit;
	const full = equationDesign(withConstant, sample, 'levels');
	const bigger = isRefusal(full) ? full : leastSquares(full.y, full.design);
	if (isRefusal(bigger)) return Object.freeze({ fit, longRunF: null });
	const df1 = bigger.k - fit.k;
	const df2 = bigger.nobs - bigger.k;
	const F = (fit.rss - bigger.rss) / df1 / (bigger.rss / df2);
	return Object.freeze({ fit, longRunF: Object.freeze({ F, df1, df2 }) });
}

/**
 * Estimates the relation in levels alone. Trending series fit each other well without any relation: Granger &
 * Newbold (1974) J. Econometrics 2, 111-120, warn when R-squared exceeds the Durbin-Watson statistic; the
 * Engle-Granger test at 5 % decides.
 */
export function levelsOnly(equation: Equation, sample: Sample, lags: ResidualLags): LevelsOnly | Refusal {
	const fit = staticRegression(equation, sample);
	if (isRefusal(fit)) return fit;
	const test = engleGranger(
		{
			y: sample.series.get(equation.dependent)!,
			det: staticDeterministic(equation),
			drivers: equation.longRun.drivers.map((name) => ({ name, column: sample.series.get(name)! })),
			dummies: longRunDummies(equation).map(({ name, kind, values }) => ({ name, kind, column: values }))
		},
		lags
	);
	return Object.freeze({
		fit,
		engleGranger: test,
		rSquaredAboveDurbinWatson: fit.r2 > fit.dw,
		reading: readLevels(test)
	});
}

/** Deterministic terms of the relation; a trend without a constant is tested as constant and trend. */
export function staticDeterministic(equation: Equation): 'n' | 'c' | 'ct' {
	if (equation.longRun.trend) return 'ct';
	return equation.longRun.constant ? 'c' : 'n';
}

function readLevels(test: EngleGranger | Refusal): LevelsReading {
	if (isRefusal(test) || test.critical === null) return 'not established';
	return test.stat < test.critical['5%']
		? 'levels cointegrate'
		: 'levels wander together without cointegrating';
}

/** F of values imposed in an equation against estimating them freely, both on the same rows. */
export function fixedAgainstFree(
	fit: ErrorCorrectionFit,
	sample: Sample
): { readonly F: number; readonly df1: number; readonly df2: number } | Refusal {
	const free: Equation = { ...fit.equation, fixed: [] };
	const design = equationDesign(
		free,
		sample,
		fit.form === 'one-step' || fit.gap === null ? 'levels' : { gap: fit.gap }
	);
	if (isRefusal(design)) return design;
	return againstLarger(fit, leastSquares(design.y, design.design));
}

/** F of an imposed long run against free levels of its drivers beside the gap. */
export function imposedAgainstFree(
	fit: ErrorCorrectionFit,
	sample: Sample
): { readonly F: number; readonly df1: number; readonly df2: number } | Refusal {
	const design = equationDesign(fit.equation, sample, { gap: fit.gap! });
	if (isRefusal(design)) return design;
	const from = fit.firstPeriod - 2;
	const levels = fit.relation!.slopes.map(({ series }) => ({
		name: `${series}.l1`,
		column: sample.series.get(series)!.slice(from, sample.T - 1)
	}));
	const columns = design.design.names.map((name, j) => ({ name, column: design.design.columns[j]! }));
	return againstLarger(fit, leastSquares(design.y, designOf([...columns, ...levels])));
}

function againstLarger({ fit }: ErrorCorrectionFit, larger: ReturnType<typeof leastSquares>) {
	if (isRefusal(larger)) return larger;
	const df1 = larger.k - fit.k;
	const df2 = larger.nobs - larger.k;
	return Object.freeze({ F: (fit.rss - larger.rss) / df1 / (larger.rss / df2), df1, df2 });
}
