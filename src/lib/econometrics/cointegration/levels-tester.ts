import type { EquationDesign } from '../error-correction/design';
import type { Equation } from '../error-correction/equation';
import type { Term } from '../error-correction/terms';
import { projectOff } from '../linalg/orthogonal';
import { isRefusal, type Refusal } from '../refusal';
import { orthogonalise, type Orthogonal } from '../regression/orthogonalise';
import { designOf } from '../series/design';
import { SmallRegression } from './small-regression';

/** The t and F of the levels for any path of y: what does not depend on y is projected off once and for all. */
export function levelsTester(
	equation: Equation,
	design: EquationDesign
): ((y: Float64Array) => { readonly t: number; readonly F: number }) | Refusal {
	const n = design.y.length;
	const lags = equation.shortRun.own;
	const pick = (test: (term: Term) => boolean) =>
		designOf(
			design.free.flatMap((term, j) =>
				test(term) ? [{ name: design.design.names[j]!, column: design.design.columns[j]! }] : []
			)
		);
	const ofY = (term: Term) => term.kind === 'own-level' || term.kind === 'own-change';
	const wide = orthogonalise(
		pick((term) => !ofY(term)),
		n
	);
	if (isRefusal(wide)) return wide;
	const narrow = orthogonalise(
		pick((term) => !ofY(term) && term.kind !== 'driver-level'),
		n
	);
	if (isRefusal(narrow)) return narrow;
	const df1 = equation.longRun.drivers.length + 1;
	const df2 = n - design.free.length;
	const unrestricted = new SmallRegression(n, lags.length + 1);
	const restricted = new SmallRegression(n, lags.length);
	const dy = new Float64Array(n);
	return (y) => {
		fill(y, design.firstPeriod, lags, unrestricted, dy, wide);
		unrestricted.column(lags.length).set(y.subarray(design.firstPeriod - 2, y.length - 1));
		off(wide, n, unrestricted.column(lags.length));
		const { rss, t } = unrestricted.solve(dy, df2);
		fill(y, design.firstPeriod, lags, restricted, dy, narrow);
		const without = restricted.solve(dy, df2).rss;
		return { t, F: (without - rss) / df1 / (rss / df2) };
	};
}

/** dy and its lags with the columns of `basis` projected off. */
function fill(
	y: Float64Array,
	firstPeriod: number,
	lags: readonly number[],
	regression: SmallRegression,
	dy: Float64Array,
	basis: Orthogonal
): void {
	const n = dy.length;
	const change = (out: Float64Array, lag: number) => {
		for (let r = 0; r < n; r++) {
			const i = firstPeriod - 1 + r - lag;
			out[r] = y[i]! - y[i - 1]!;
		}
		off(basis, n, out);
	};
	change(dy, 0);
	for (const [l, lag] of lags.entries()) change(regression.column(l), lag);
}

const off = (basis: Orthogonal, n: number, v: Float64Array): void => {
	projectOff(basis.basis, n, basis.means.length, v);
};
