import { ols, type OlsFit } from '$lib/econometrics/regression/ols';
import { constant, seasonalDummies, trend } from '$lib/econometrics/series/deterministic';
import { designOf, type Regressor } from '$lib/econometrics/series/design';
import { differenceLag, laggedDifference, levelLag } from '$lib/econometrics/series/lags';
import { listOf, must, seriesOf, type Case, type EcmModel } from './reference';

/** The regressions that the checks of a case speak about: `ols`, `ecm1`, `ecm1.seasonal`, `static`, or a mean. */
export function equationOf(of: Case, on: string): OlsFit {
	if (on === 'ols' || on === 'static') return must(levels(of));
	if (on === 'ecm1') return must(oneStep(of, false));
	if (on === 'ecm1.seasonal') return must(oneStep(of, true));
	const mean = /^(?:diff\((?<difference>.+)\)|(?<level>[^()]+?)) ?~ ?1$/.exec(on)?.groups;
	if (!mean) throw new Error(`No equation is called ${on}.`);
	const v = seriesOf(of, mean.difference ?? mean.level!);
	const y = mean.difference ? laggedDifference(v, 0, 1, v.length - 1) : v;
	return must(ols(y, designOf([constant(y.length)])));
}

/** y on the deterministic terms and the drivers, all in levels. */
function levels(of: Case) {
	const model = of.model!;
	const y = seriesOf(of, model.y);
	const n = y.length;
	const deterministic = [constant(n)];
	if ('det' in model && model.det === 'ct') deterministic.push(trend(1, n));
	const drivers = listOf(model.x).map((name): Regressor => ({ name, column: seriesOf(of, name) }));
	return ols(y, designOf([...deterministic, ...drivers]));
}

/** The change of y on lagged levels and on changes, rows m+2..T with m the longest lag. */
function oneStep(of: Case, seasonal: boolean) {
	const model = of.model as EcmModel;
	const q = listOf(model.q);
	const y = seriesOf(of, model.y);
	const from = Math.max(model.p, ...q) + 1;
	const to = y.length - 1;
	const n = to - from + 1;
	const regressors = [constant(n)];
	if (model.det === 'ct') regressors.push(trend(from + 1, n));
	// Every sample with seasonal dummies begins with the first period of a year.
	const season = (from % of.frequency!) + 1;
	if (seasonal) regressors.push(...seasonalDummies(of.frequency!, season, n));
	regressors.push(levelLag('y', y, 1, from, to));
	for (const x of model.x) regressors.push(levelLag(x, seriesOf(of, x), 1, from, to));
	for (let i = 1; i <= model.p; i++) regressors.push(differenceLag('y', y, i, from, to));
	for (const [j, x] of model.x.entries()) {
		for (let l = 0; l <= q[j]!; l++) regressors.push(differenceLag(x, seriesOf(of, x), l, from, to));
	}
	return ols(laggedDifference(y, 0, from, to), designOf(regressors));
}
