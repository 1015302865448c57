import type { AnyCheck } from './context';
import { adjustmentHalfLife, adjustmentSign, adjustmentSignificance } from './checks/adjustment';
import { cointegrationBounds } from './checks/bounds';
import { designCollinearity, designDegrees } from './checks/design';
import { cointegrationEcmT } from './checks/ecm-t';
import { cointegrationEngleGranger } from './checks/engle-granger';
import { integrationAdf, integrationKpss, integrationOrder } from './checks/integration';
import { dataIntegrity } from './checks/integrity';
import { longRunPrecision, longRunRange, longRunSigns } from './checks/long-run';
import { replicationCoefficients } from './checks/replication';
import { residualAutocorrelation, residualPortmanteau } from './checks/residual-autocorrelation';
import {
	residualArch,
	residualFunctionalForm,
	residualHeteroskedasticity,
	residualNormality
} from './checks/residual-distribution';
import { stationarityHeld } from './checks/residual-stationarity-held';
import { stationarityRefit } from './checks/residual-stationarity-refit';
import { stabilityCusum, stabilityCusumsq, stabilitySupF } from './checks/stability';

/**
 * Every check by its id, in the order they are made: a check may look at those before it (the residuals decide how
 * cointegration is drawn, cointegration decides whether the speed can be tested).
 */
export const registry: ReadonlyMap<string, AnyCheck> = new Map<string, AnyCheck>([
	['data.integrity', dataIntegrity],
	['integration.adf', integrationAdf],
	['integration.kpss', integrationKpss],
	['integration.order', integrationOrder],
	['residual.autocorrelation', residualAutocorrelation],
	['residual.portmanteau', residualPortmanteau],
	['residual.arch', residualArch],
	['residual.heteroskedasticity', residualHeteroskedasticity],
	['residual.normality', residualNormality],
	['residual.functional-form', residualFunctionalForm],
	['residual.stationarity-refit', stationarityRefit],
	['residual.stationarity-held', stationarityHeld],
	['cointegration.engle-granger', cointegrationEngleGranger],
	['cointegration.ecm-t', cointegrationEcmT],
	['cointegration.bounds', cointegrationBounds],
	['adjustment.sign', adjustmentSign],
	['adjustment.significance', adjustmentSignificance],
	['adjustment.half-life', adjustmentHalfLife],
	['long-run.signs', longRunSigns],
	['long-run.range', longRunRange],
	['long-run.precision', longRunPrecision],
	['replication.coefficients', replicationCoefficients],
	['design.collinearity', designCollinearity],
	['design.degrees', designDegrees],
	['stability.cusum', stabilityCusum],
	['stability.cusumsq', stabilityCusumsq],
	['stability.sup-f', stabilitySupF]
]);

/** The id of the check that counts the others; it is made last. */
export const familyId = 'family.false-alarms';
