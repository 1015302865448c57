import { residualStationarity, type GapOrigin } from '$lib/econometrics/cointegration/residual-stationarity';
import { staticDeterministic } from '$lib/econometrics/error-correction/companions';
import { longRunDummies } from '$lib/econometrics/error-correction/equation';
import { staticRegression } from '$lib/econometrics/error-correction/static-regression';
import { isRefusal } from '$lib/econometrics/refusal';
import { linePath } from '$lib/domain/policy';
import { notAssessable, refusedCheck, tooFew, type AnyCheck } from '../context';
import { residualLagsOf } from '../relation';
import { sources } from '../sources';

import { judged } from './gap-test';
/** Unit root in the gap of the relation estimated on this very sample. */
export const stationarityRefit: AnyCheck = (context) => {
	const id = 'residual.stationarity-refit';
	const rest = {
		source: sources[id]!,
		nullHypothesis: 'unit-root-in-gap',
		lines: ['least'],
		levels: ['shown']
	};
	if (isRefusal(context.sample)) return refusedCheck(id, context.sample, rest);
	if (context.spec.estimator.kind === 'elsewhere')
		return notAssessable(id, 'given', 'The relation was given; this test estimates it afresh.', rest);
	const { equation, sample } = context.sample;
	const drivers = equation.longRun.drivers.length;
	// The tables are for least-squares residuals of the levels, so that is the gap tested, whatever the estimator.
	const fit = staticRegression(equation, sample);
	if (isRefusal(fit)) return refusedCheck(id, fit, rest);
	const origin: GapOrigin = {
		coefficients: 'estimated-here',
		det: staticDeterministic(equation),
		drivers,
		step: longRunDummies(equation).some(({ kind }) => kind === 'step')
	};
	const test = residualStationarity(fit.resid, origin, residualLagsOf(context, sample.T));
	if (isRefusal(test)) return refusedCheck(id, test, rest);
	const least = Math.max(context.settings.number(linePath(id, 'least')), 10 + 2 * test.lags + 5 * drivers);
	const few = tooFew(sample.T, least, 'periods');
	if (few) return refusedCheck(id, few, rest);
	const { opposite } = context;
	return judged(id, context, test, opposite?.rejects ?? false, {
		...rest,
		levels: ['shown', 'against'],
		...(opposite && { parts: [opposite.part] })
	});
};
