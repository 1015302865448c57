import { isRefusal, refuse, type Refusal } from '../refusal';
import { equationDesign, type EquationDesign } from '../error-correction/design';
import { longRunDummies, type Equation, type Sample } from '../error-correction/equation';
import type { Term } from '../error-correction/terms';
import { mean } from '../linalg/vectors';
import { mulberry32 } from '../random/mulberry32';
import { leastSquares, type LeastSquares } from '../regression/least-squares';
import { designOf, type Regressor } from '../series/design';
import { quantile } from './quantile';
import { levelsTester } from './levels-tester';

/** Tests of no relation in levels, their distribution drawn under the null with this very design. */
export interface BootstrapEcm {
	readonly replications: number;
	readonly seed: number;
	readonly draws: number;
	/** Rejects for small values. */
	readonly t: { readonly stat: number; readonly pvalue: number; readonly critical: Levels };
	/** F of y(t-1) and all drivers at t-1; rejects for large values. */
	readonly F: { readonly stat: number; readonly pvalue: number; readonly critical: Levels };
}

interface Levels {
	readonly '1%': number;
	readonly '5%': number;
	readonly '10%': number;
}

/**
 * Bootstrap of the t-ratio and the F of the levels in a one-step equation, for short samples and for steps in the
 * long run, where tables do not hold. Under the null dy follows a constant, the changes of the long-run dummies
 * and the short-run terms; its residuals, spread by sqrt(n / (n - k)), are drawn, paths cumulated and the whole
 * equation estimated again with drivers and dummies as observed. Davison & Hinkley (1997) Bootstrap Methods and
 * their Application, chapter 4. Refuses `given` where coefficients are fixed.
 */
export function bootstrapEcm(
	equation: Equation,
	sample: Sample,
	{ replications, seed }: { readonly replications: number; readonly seed: number }
): BootstrapEcm | Refusal {
	if (equation.fixed.length > 0)
		return refuse('given', 'a coefficient is fixed, so the levels are not all free');
	if (!Number.isInteger(replications) || replications < 1)
		return refuse('domain', `${replications} is not a number of replications`);
	const design = equationDesign(equation, sample, 'levels');
	if (isRefusal(design)) return design;
	const full = leastSquares(design.y, design.design);
	if (isRefusal(full)) return full;
	const nullFit = fitNull(equation, sample);
	if (isRefusal(nullFit)) return nullFit;
	const tester = levelsTester(equation, design);
	if (isRefusal(tester)) return tester;
	const observed = tester(sample.series.get(equation.dependent)!);
	const { path, draw, draws } = nullPaths(equation, sample, design, nullFit, seed);
	const t = new Float64Array(replications);
	const F = new Float64Array(replications);
	for (let b = 0; b < replications; b++) {
		draw();
		const drawn = tester(path);
		t[b] = drawn.t;
		F[b] = drawn.F;
	}
	const share = (count: number) => (1 + count) / (replications + 1);
	const tail = (values: Float64Array, q: (level: number) => number): Levels =>
		Object.freeze({
			'1%': quantile(values, q(0.01)),
			'5%': quantile(values, q(0.05)),
			'10%': quantile(values, q(0.1))
		});
	return Object.freeze({
		replications,
		seed,
		draws: draws * replications,
		t: Object.freeze({
			stat: observed.t,
			pvalue: share(t.filter((value) => value <= observed.t).length),
			critical: tail(t, (level) => level)
		}),
		F: Object.freeze({
			stat: observed.F,
			pvalue: share(F.filter((value) => value >= observed.F).length),
			critical: tail(F, (level) => 1 - level)
		})
	});
}

/** dy on constant, short-run dummies, changes of long-run dummies and lags: the equation without a relation. */
function fitNull(equation: Equation, sample: Sample): LeastSquares | Refusal {
	const withConstant = { ...equation, shortRun: { ...equation.shortRun, constant: true } };
	const design = equationDesign(withConstant, sample, 'none');
	if (isRefusal(design)) return design;
	const own = (term: Term) => term.kind === 'own-change';
	const columns = design.design.names.map((name, j) => ({ name, column: design.design.columns[j]! }));
	const changes = longRunDummies(equation)
		.map(({ name, values }): Regressor => {
			const from = design.firstPeriod - 1;
			return { name: `d.${name}`, column: values.slice(from).map((v, r) => v - values[from + r - 1]!) };
		})
		.filter(({ column }) => column.some((value) => value !== 0));
	// The own lags go last: a replication replaces them by its own.
	const ordered = [
		...columns.filter((_, j) => !own(design.free[j]!)),
		...changes,
		...columns.filter((_, j) => own(design.free[j]!))
	];
	return leastSquares(design.y, designOf(ordered));
}

/** A buffer for one path of y and the function that draws the next into it. */
function nullPaths(
	equation: Equation,
	sample: Sample,
	design: EquationDesign,
	fit: LeastSquares,
	seed: number
): { readonly path: Float64Array; readonly draw: () => void; readonly draws: number } {
	const lags = equation.shortRun.own;
	const fixedColumns = fit.k - lags.length;
	const systematic = new Float64Array(fit.nobs);
	for (let j = 0; j < fixedColumns; j++) {
		for (let r = 0; r < fit.nobs; r++) systematic[r]! += fit.coef[j]! * fit.design.columns[j]![r]!;
	}
	const weights = lags.map((_, i) => fit.coef[fixedColumns + i]!);
	const centre = mean(fit.resid);
	const spread = Math.sqrt(fit.nobs / (fit.nobs - fit.k));
	const resid = fit.resid.map((value) => (value - centre) * spread);
	const uniform = mulberry32(seed);
	const path = sample.series.get(equation.dependent)!.slice();
	const draw = () => {
		for (let r = 0; r < fit.nobs; r++) {
			const i = design.firstPeriod - 1 + r;
			let change = systematic[r]! + resid[Math.floor(resid.length * uniform())]!;
			for (const [l, lag] of lags.entries()) change += weights[l]! * (path[i - lag]! - path[i - lag - 1]!);
			path[i] = path[i - 1]! + change;
		}
	};
	return { path, draw, draws: fit.nobs };
}
