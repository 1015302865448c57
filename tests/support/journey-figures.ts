import { expect } from 'vitest';
import { listOf, type Case, type EcmModel } from '../reference/reference';
import type { ShownCheck, ShownPart, ShownReport, ShownRow } from './journey-report';
import { Figures } from './shown';

/**
 * Holds a report as it is shown against the reference figures of its case (R 4.2.2 and Python packages; sources in
 * tests/reference/SOURCES.md). The model is the one-step equation with a constant.
 */
type Tree = Readonly<Record<string, unknown>>;

/** A value of a reference check by its path, undefined where the case has no such check. */
const valueOf = (of: Case, id: string, ...path: readonly string[]): unknown =>
	path.reduce<unknown>(
		(value, key) => (value as Tree | undefined)?.[key],
		of.checks.find((c) => c.id === id)?.values
	);

const further = (of: { readonly further: readonly string[] }, name: string): string | undefined =>
	of.further.find((each) => each.startsWith(`${name} `))?.slice(name.length + 1);

/** The name a term has on screen, from the reference's code: `d.realdpi.l1` is Δrealdpi(t−1). */
const nameOf = (code: string, y: string): string => {
	if (code === 'const') return 'constant';
	const [, difference, series, lag] = /^(d\.)?(.+)\.l(\d+)$/.exec(code)!;
	return `${difference ? 'Δ' : ''}${series === 'y' ? y : series}(t${lag === '0' ? '' : `−${lag}`})`;
};

/** The coefficients and errors of the case as a table to paste: term, value, error in brackets. */
export const claimsOf = (of: Case, decimals: number): string => {
	const { y } = of.model as EcmModel;
	const [coef, se] = ['coef', 'se'].map((key) => valueOf(of, 'ecm1', key) as Record<string, number>);
	return Object.keys(coef!)
		.map((code) => `${nameOf(code, y)}\t${coef![code]!.toFixed(decimals)}\t(${se![code]!.toFixed(decimals)})`)
		.join('\n');
};

const compareTerms = (figures: Figures, of: Case, report: ShownReport): void => {
	const { y } = of.model as EcmModel;
	const rows = report.estimates['Equation']!;
	const codes = Object.keys(valueOf(of, 'ecm1', 'coef') as Tree);
	expect(Object.keys(rows).sort()).toEqual(codes.map((code) => nameOf(code, y)).sort());
	for (const code of codes) {
		const row = rows[nameOf(code, y)]!;
		figures.same(row['estimate'], valueOf(of, 'ecm1', 'coef', code), code);
		figures.same(row['s.e.'], valueOf(of, 'ecm1', 'se', code), `s.e. of ${code}`);
		figures.same(row['t'], valueOf(of, 'ecm1', 't', code), `t of ${code}`);
		figures.sameP(row['p'], valueOf(of, 'ecm1', 'p', code), code);
	}
};

/** The long run with its delta-method errors, and the speed; its error is that of the lagged level. */
const compareLongRun = (figures: Figures, of: Case, report: ShownReport): void => {
	const rows = report.estimates['Long run']!;
	const known = valueOf(of, 'ecm1', 'long_run') as Tree;
	expect(Object.keys(rows)).toHaveLength(Object.keys(known).length);
	for (const [name, long] of Object.entries(known as Record<string, Tree>)) {
		const row = rows[name === 'const' ? 'constant' : name]!;
		figures.same(row['estimate'], long['coef'], `long run of ${name}`);
		figures.same(row['s.e.'], long['se'], `delta error of ${name}`);
		figures.same(row['t'], long['t'], `long-run t of ${name}`);
		figures.sameP(row['p'], long['p_t'], `long run of ${name}`);
	}
	const speed = report.estimates['Adjustment']!['speed of adjustment']!;
	figures.same(speed['estimate'], valueOf(of, 'ecm1', 'lambda'), 'speed');
	figures.same(speed['s.e.'], valueOf(of, 'ecm1', 'se', 'y.l1'), 's.e. of the speed');
	figures.same(report.checks['adjustment-sign']!.statistic, valueOf(of, 'ecm1', 'lambda'), 'speed');
	const half = Object.entries(report.estimates['Adjustment']!).find(([term]) =>
		term.startsWith('half-life of a shock')
	)?.[1]['estimate'];
	figures.same(half, halfLife(of), 'half-life');
	figures.same(report.checks['adjustment-half-life']!.statistic, halfLife(of), 'half-life');
};

/**
 * Periods after which the response of the level to a shock stays below one half, from the reference coefficients. The
 * `half_life` of the case files is ln 0.5 / ln(1 - lambda), which leaves out the lagged differences.
 */
const halfLife = (of: Case): number => {
	const coef = valueOf(of, 'ecm1', 'coef') as Record<string, number>;
	const { p } = of.model as EcmModel;
	const response = [1];
	const at = (t: number): number => response[t] ?? 0;
	for (let t = 1; t <= 400; t++) {
		let change = coef['y.l1']! * at(t - 1);
		for (let i = 1; i <= p; i++) change += coef[`d.y.l${i}`]! * (at(t - i) - at(t - i - 1));
		response.push(at(t - 1) + change);
	}
	const last = response.findLastIndex((each) => Math.abs(each) > 0.5);
	const [above, below] = [Math.abs(at(last)), Math.abs(at(last + 1))];
	// Between two periods the response falls geometrically, or along a line where it changes its sign.
	const crosses = at(last) * at(last + 1) <= 0;
	return last + (crosses ? (above - 0.5) / (above + below) : Math.log(above / 0.5) / Math.log(above / below));
};

const fitColumns = {
	n: 'nobs',
	k: 'k',
	'R²': 'r2',
	'R², adjusted': 'adjr2',
	'log- likelihood': 'loglik',
	AIC: 'aic',
	BIC: 'bic',
	HQIC: 'hqic',
	'Durbin- Watson': 'dw',
	's.e. of regression': 'sigma'
} as const;

/** The fit of the model, and the static regression beside it. The differences alone have no reference. */
const compareFit = (figures: Figures, of: Case, report: ShownReport): void => {
	const known: readonly (readonly [ShownRow, Tree])[] = [
		[report.fit['this model']!, of.checks.find(({ id }) => id === 'ecm1')!.values],
		[report.fit['levels only']!, valueOf(of, 'eg.c.0', 'static') as Tree]
	];
	for (const [row, values] of known)
		for (const [column, key] of Object.entries(fitColumns))
			figures.same(row[column], values[key], `fit, ${column}`);
	for (const row of report.companions[1]!) {
		const code = row['term'] === 'constant' ? 'const' : row['term']!;
		figures.same(row['estimate'], valueOf(of, 'eg.c.0', 'static', 'coef', code), `levels only, ${code}`);
	}
};

/** Dickey-Fuller at the lag AIC chose, where the case chose the same; the cap of its search may be another. */
const compareDickeyFuller = (figures: Figures, of: Case, parts: readonly ShownPart[]): number => {
	let found = 0;
	for (const part of parts) {
		const on = further(part, 'form') === 'level' ? part.about : `diff(${part.about})`;
		const lags = Number(further(part, 'lags'));
		const id = [`adf_auto.${on}.c.AIC`, `adf.${on}.c.${lags}`].find(
			(each) => valueOf(of, each, 'lags') === lags
		);
		if (id === undefined) continue;
		figures.same(part.statistic, valueOf(of, id, 'stat'), id);
		figures.sameP(part.p, valueOf(of, id, 'pvalue'), id);
		figures.same(part.n, valueOf(of, id, 'nobs'), `n of ${id}`);
		figures.same(part.critical, valueOf(of, id, 'crit', '5%'), `critical value of ${id}`);
		found++;
	}
	return found;
};

/** KPSS at the Hobijn-Franses-Ooms lag and at the short one; the p-value is interpolated between 0.01 and 0.1. */
const compareKpss = (figures: Figures, of: Case, parts: readonly ShownPart[]): number => {
	let found = 0;
	for (const part of parts) {
		const on = further(part, 'form') === 'level' ? part.about : `diff(${part.about})`;
		const lag = Number(further(part, 'lag'));
		const id = [`kpss_auto.${on}.c`, `kpss.${on}.c.L${lag}`].find((each) => valueOf(of, each, 'lag') === lag);
		if (id === undefined) continue;
		figures.same(part.statistic, valueOf(of, id, 'stat'), id);
		const p = valueOf(of, id, 'pvalue_interp') as number;
		if (p <= 0.01) expect(part.p, id).toBe('< 0.01');
		else if (p >= 0.1) expect(part.p, id).toBe('> 0.1');
		else figures.sameP(part.p, p, id);
		found++;
	}
	return found;
};

const partOf = (check: ShownCheck, about: string): ShownPart => {
	const part = check.parts.find((each) => each.about === about);
	if (!part) throw new Error(`${check.title} shows no part ${about}`);
	return part;
};

/** Every residual check that the page assesses. */
const compareResiduals = (figures: Figures, of: Case, { checks }: ShownReport): void => {
	const assessed = (id: string): ShownCheck | undefined =>
		checks[id]!.verdict === 'not assessable' ? undefined : checks[id];
	for (const part of assessed('residual-autocorrelation')?.parts ?? []) {
		const id = `bg.${further(part, 'order')}`;
		figures.same(part.statistic, valueOf(of, id, 'F'), id);
		figures.sameP(part.p, valueOf(of, id, 'F_p'), id);
		figures.same(further(part, 'LM'), valueOf(of, id, 'lm'), `LM of ${id}`);
		figures.sameP(further(part, 'p of LM'), valueOf(of, id, 'lm_p'), `LM of ${id}`);
		figures.same(further(part, 'denominator degrees of freedom'), valueOf(of, id, 'df2'), `df2 of ${id}`);
	}
	for (const part of assessed('residual-portmanteau')?.parts ?? []) {
		if (part.verdict === 'not assessable') continue;
		const id = `lb.${further(part, 'lags')}`;
		figures.same(part.statistic, valueOf(of, id, 'lb'), id);
		figures.sameP(part.p, valueOf(of, id, 'lb_p'), id);
	}
	for (const part of assessed('residual-arch')?.parts ?? []) {
		const id = `arch.${further(part, 'order')}`;
		figures.same(part.statistic, valueOf(of, id, 'lm'), id);
		figures.sameP(part.p, valueOf(of, id, 'lm_p'), id);
		figures.same(further(part, 'F'), valueOf(of, id, 'F'), `F of ${id}`);
		figures.sameP(further(part, 'p of F'), valueOf(of, id, 'F_p'), `F of ${id}`);
		figures.same(part.n, valueOf(of, id, 'nobs'), `n of ${id}`);
	}
	const variance = assessed('residual-heteroskedasticity');
	if (variance) {
		figures.same(variance.statistic, valueOf(of, 'bp', 'koenker'), 'Breusch-Pagan, studentised');
		figures.sameP(variance.p, valueOf(of, 'bp', 'koenker_p'), 'Breusch-Pagan, studentised');
		const white = partOf(variance, 'White, special form');
		figures.same(white.statistic, valueOf(of, 'white_special', 'special'), 'White');
		figures.sameP(white.p, valueOf(of, 'white_special', 'special_p'), 'White');
	}
	const normality = assessed('residual-normality');
	if (normality) {
		figures.same(normality.statistic, valueOf(of, 'jb', 'jb'), 'Jarque-Bera');
		figures.sameP(normality.p, valueOf(of, 'jb', 'p'), 'Jarque-Bera');
		figures.same(further(normality, 'skewness'), valueOf(of, 'jb', 'skew'), 'skewness');
		figures.same(further(normality, 'kurtosis'), valueOf(of, 'jb', 'kurt'), 'kurtosis');
	}
	const form = assessed('residual-functional-form');
	if (form) {
		figures.same(form.statistic, valueOf(of, 'reset.23', 'F'), 'RESET');
		figures.sameP(form.p, valueOf(of, 'reset.23', 'F_p'), 'RESET');
		const collier = partOf(form, 'Harvey-Collier');
		figures.same(collier.statistic, valueOf(of, 'harvey_collier', 't'), 'Harvey-Collier');
		figures.sameP(collier.p, valueOf(of, 'harvey_collier', 'p'), 'Harvey-Collier');
	}
};

/** CUSUM and its squares. sup-F is shown for the gap form; the case files hold the levels form, so it stays out. */
const compareStability = (figures: Figures, of: Case, { checks }: ShownReport): void => {
	const cusum = checks['stability-cusum']!;
	if (cusum.verdict !== 'not assessable') {
		figures.same(cusum.statistic, valueOf(of, 'cusum', 'stat'), 'CUSUM');
		figures.sameP(cusum.p, valueOf(of, 'cusum', 'p'), 'CUSUM');
	}
	const squares = checks['stability-cusumsq']!;
	if (squares.verdict !== 'not assessable') {
		figures.same(squares.statistic, valueOf(of, 'cusumsq', 'max_dev'), 'CUSUM of squares');
		figures.same(squares.critical, valueOf(of, 'cusumsq', 'crit_two_sided', '5%'), 'bound of the squares');
	}
};

/**
 * Engle-Granger at the lag that was chosen, where the case has it (0, 1 and 4). Below 80 periods the judged p-value is a
 * bootstrap's and that of the tables stands beside it. The bounds F and its t; the t of the speed itself.
 */
const compareCointegration = (figures: Figures, of: Case, { checks }: ShownReport): void => {
	const granger = checks['cointegration-engle-granger']!;
	const id = `eg.c.${further(granger, 'lags')}`;
	if (valueOf(of, id, 'adf_stat') !== undefined) {
		figures.same(granger.statistic, valueOf(of, id, 'adf_stat'), id);
		figures.same(granger.critical, valueOf(of, id, 'crit_Tm1', '5%'), `critical value of ${id}`);
		const table = granger.parts.find(({ about }) => about === 'table');
		figures.sameP((table ?? granger).p, valueOf(of, id, 'pvalue'), id);
	}
	figures.same(checks['cointegration-ecm-t']!.statistic, valueOf(of, 'pss.3', 't'), 't of the speed');
	const bounds = checks['cointegration-bounds']!;
	if (bounds.verdict === 'not assessable') return;
	figures.same(bounds.statistic, valueOf(of, 'pss.3', 'F'), 'bounds F');
	figures.same(partOf(bounds, 't').statistic, valueOf(of, 'pss.3', 't'), 'bounds t');
};

/** The t of the speed with a HAC error: coefficient over the Newey-West error of the case, at the lag shown. */
const compareSpeedTest = (figures: Figures, of: Case, { checks }: ShownReport): void => {
	const check = checks['adjustment-significance']!;
	const error = valueOf(of, 'ecm1.robust', `NW_L${further(check, 'lag')}`, 'y.l1') as number;
	figures.same(
		check.statistic,
		(valueOf(of, 'ecm1', 'coef', 'y.l1') as number) / error,
		'HAC t of the speed'
	);
};

/** Holds every figure of the report that its case has against it. @returns how many were compared */
export const compareReport = (of: Case, report: ShownReport): number => {
	const figures = new Figures();
	compareTerms(figures, of, report);
	compareLongRun(figures, of, report);
	compareFit(figures, of, report);
	const series = 2 * (1 + listOf((of.model as EcmModel).x).length);
	expect(compareDickeyFuller(figures, of, report.checks['integration-adf']!.parts)).toBe(series);
	expect(compareKpss(figures, of, report.checks['integration-kpss']!.parts)).toBe(2 * series);
	compareCointegration(figures, of, report);
	compareSpeedTest(figures, of, report);
	compareResiduals(figures, of, report);
	compareStability(figures, of, report);
	figures.same(
		further(report.checks['design-collinearity']!, 'condition number of the equation'),
		valueOf(of, 'vif', 'condition_number_scaled'),
		'condition number'
	);
	return figures.count;
};
