import type { EstimatorKind, Specification } from './specification';
import type { SpecificationTerm } from './specification-terms';
import type { Override, Purpose, Reason, Verdict } from './run';

/** A number where there is one; a result holds no NaN and no infinity. */
export type Figure = number | null;

export interface Estimate {
	readonly value: number;
	readonly se: Figure;
	readonly t: Figure;
	readonly p: Figure;
}

export interface TermEstimate extends Estimate {
	readonly term: SpecificationTerm;
	/** Imposed by the specification, not estimated. */
	readonly fixed?: boolean;
}

/** Covariance of estimates, by the codes of their terms. */
export interface Covariance {
	readonly terms: readonly string[];
	readonly rows: readonly (readonly number[])[];
}

export interface FitStatistics {
	readonly n: number;
	readonly k: number;
	readonly df: number;
	readonly rss: number;
	readonly sigma: number;
	readonly r2: number;
	readonly adjustedR2: number;
	readonly logLikelihood: number;
	readonly aic: number;
	readonly bic: number;
	readonly hqic: number;
	readonly durbinWatson: number;
	readonly conditionNumber: Figure;
}

export interface HalfLife {
	/** Periods until half of a shock is gone; null where it does not exist. */
	readonly value: Figure;
	readonly low: Figure;
	/** Null: the interval is open to the right. */
	readonly high: Figure;
	readonly level: number;
	/** Why there is none. */
	readonly note?: string;
}

/** An estimated regression: terms in the order of the design. */
export interface EquationEstimates {
	readonly terms: readonly TermEstimate[];
	readonly covariance: Covariance;
	readonly fit: FitStatistics;
	readonly firstPeriod: string;
	readonly lastPeriod: string;
}

export interface Estimates {
	readonly estimator: EstimatorKind;
	readonly standardErrors: { readonly kind: Specification['standardErrors']; readonly lag?: number };
	/** lambda > 0 when the model corrects; the coefficient on the gap is its negative. */
	readonly speed: Estimate;
	readonly halfLife: HalfLife;
	/** The relation in the gap; delta-method errors in the one-step form, none where it was imposed or is static. */
	readonly longRun: readonly TermEstimate[];
	/** The same relation from the one-step form with delta-method errors, which the declared signs and ranges use. */
	readonly longRunOneStep: readonly TermEstimate[] | null;
	/** Of speed, slopes and constant of the one-step form: codes `speed`, `long.<series>`, `long.const`. */
	readonly longRunCovariance: Covariance | null;
	readonly equation: EquationEstimates;
	/** First step of a two-step estimate; its t-ratios are not t-distributed and are not shown. */
	readonly static: EquationEstimates | null;
}

/** A cheaper model that the error-correction model claims to beat. */
export interface Companion {
	readonly kind: 'differences-only' | 'levels-only';
	readonly estimates: EquationEstimates | null;
	readonly refused?: { readonly reason: Reason; readonly detail: string };
	/** The levels wander together without cointegrating: their fit says nothing. */
	readonly warning?: 'spurious-levels' | 'not-established';
	/** F of the long-run terms that the model adds to the differences; not F-distributed unless levels cointegrate. */
	readonly longRunF?: { readonly value: number; readonly df1: number; readonly df2: number };
}

export interface SeriesUsed {
	readonly name: string;
	readonly unit: string;
	readonly from: string;
	readonly to: string;
	readonly values: readonly number[];
}

/** What the model sees and leaves over; all arrays have the length of `periods`, null where not defined. */
export interface ModelSeries {
	readonly periods: readonly string[];
	readonly level: readonly number[];
	readonly longRun: readonly Figure[];
	readonly gap: readonly Figure[];
	readonly residuals: readonly Figure[];
	/** Standard deviation of the gap over the sample. */
	readonly gapSd: Figure;
}

export type Parameter = number | string | boolean | readonly number[] | readonly string[];

export interface Statistic {
	readonly name: string;
	readonly value: Figure;
}

export interface CriticalValue {
	/** Level as text: `5%`. */
	readonly level: string;
	readonly value: number;
}

export type CheckPlot =
	| {
			readonly kind: 'cusum';
			readonly periods: readonly string[];
			readonly path: readonly number[];
			readonly bound: readonly number[];
	  }
	| {
			readonly kind: 'cusumsq';
			readonly periods: readonly string[];
			readonly path: readonly number[];
			readonly lower: readonly number[];
			readonly upper: readonly number[];
	  }
	| {
			readonly kind: 'sup-f';
			readonly periods: readonly string[];
			readonly path: readonly number[];
			readonly critical: number;
	  }
	| { readonly kind: 'acf'; readonly acf: readonly number[]; readonly bound: number };

/** One statistic of a check that looks at several (orders, series, levels). */
export interface Part {
	readonly about: string;
	readonly statistic?: Statistic;
	readonly parameters?: Readonly<Record<string, Parameter>>;
	readonly pValue?: number;
	/** Where only a bracket of the p-value is known: `> 0.1`. */
	readonly pText?: string;
	readonly criticalValues?: readonly CriticalValue[];
	readonly n?: number;
	readonly verdict?: Verdict;
	readonly reason?: Reason;
	readonly detail?: string;
}

/** The outcome of one check: evidence and verdict; the sentence is rendered from it. */
export interface Check {
	readonly id: string;
	readonly group: string;
	/** Null where the check is shown only: the joint reading of the series, or nobody, judges it. */
	readonly verdict: Verdict | null;
	/** Given with *not assessable*. */
	readonly reason?: Reason;
	/** The sentence of a refusal, or the condition a verdict carries. */
	readonly detail?: string;
	/** Whether the null was rejected at the policy's level, before other rules. */
	readonly rejected?: boolean;
	/** Codes of the rules that changed the plain reading: `critical-and-p-differ`, `autocorrelated-residuals`, … */
	readonly because?: readonly string[];
	readonly statistic?: Statistic;
	readonly parameters: Readonly<Record<string, Parameter>>;
	readonly pValue?: number;
	readonly pText?: string;
	readonly criticalValues?: readonly CriticalValue[];
	readonly n?: number;
	/** What the statistic is judged against; absent for rules. */
	readonly nullHypothesis?: string;
	readonly source: string;
	/** Paths of the policy lines that set the thresholds. */
	readonly thresholdFrom: readonly string[];
	readonly parts?: readonly Part[];
	readonly plot?: CheckPlot;
	/** The outcome under the policy's own settings, where an override changed it. */
	readonly byDefault?: {
		readonly verdict: Verdict | null;
		readonly statistic: Figure;
		readonly pValue: Figure;
	};
}

export interface Group {
	readonly group: string;
	readonly verdict: Verdict;
	readonly reason?: Reason;
	readonly primary: string;
	/** Corroborating checks that lowered *holds* to *query*. */
	readonly loweredBy: readonly string[];
	readonly checks: readonly string[];
}

export interface ReplicationRow {
	readonly term: SpecificationTerm;
	/** As typed. */
	readonly claimed: string;
	readonly value: number;
	readonly decimals: number;
	readonly claimedSe?: string;
	readonly ours: Figure;
	readonly oursSe: Figure;
	readonly difference: Figure;
	/** Largest difference that still replicates. */
	readonly tolerance: number;
	readonly replicates: boolean | null;
}

/** How many false alarms chance explains among the checks judged at a level. */
export interface Family {
	readonly judged: number;
	readonly alarms: number;
	readonly expected: number;
	/** If the checks were independent. */
	readonly atLeastOne: number;
	readonly members: readonly {
		readonly check: string;
		readonly level: number;
		readonly p: Figure;
		readonly holm: Figure;
	}[];
}

export interface RunResult {
	readonly schema: 1;
	readonly request: {
		/** Digest of the canonical request. */
		readonly digest: string;
		readonly specification: string;
		readonly vintage: string;
		readonly policy: string;
		readonly policyRelease: string;
		readonly tier: number;
		readonly settings: readonly Override[];
		readonly seed: number;
		readonly purpose: Purpose;
		readonly engine: string;
	};
	readonly specification: Specification;
	readonly estimates: Estimates | null;
	/** Why nothing was estimated. */
	readonly refused?: { readonly reason: Reason; readonly detail: string };
	readonly companions: readonly Companion[];
	readonly series: readonly SeriesUsed[];
	readonly model: ModelSeries | null;
	readonly checks: readonly Check[];
	/** Checks of the battery switched off by the policy's tier, by id. */
	readonly switchedOff: readonly string[];
	readonly groups: readonly Group[];
	readonly replication: readonly ReplicationRow[];
	readonly family: Family;
	/** SHA-256 of numbers, verdicts, parameters and reasons at 10 significant digits. */
	readonly digest: string;
}
