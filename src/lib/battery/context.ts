import { isRefusal, type Refusal } from '$lib/econometrics/refusal';
import { levelPath, linePath, type Policy } from '$lib/domain/policy';
import type { Reason, RunRequest, Verdict } from '$lib/domain/run';
import type { Check, Estimates, Part, ReplicationRow } from '$lib/domain/run-result';
import type { Specification } from '$lib/domain/specification';
import type { Model } from './model';
import type { Opposite } from './opposite';
import type { ModelSample } from './sample';
import type { Settings } from './settings';
import type { Levels } from './verdict';

/** What a check may look at. */
export interface Context {
	readonly request: RunRequest;
	readonly spec: Specification;
	readonly policy: Policy;
	readonly settings: Settings;
	readonly levels: Levels;
	/** Coverage of intervals. */
	readonly interval: number;
	/** The sample, or why there is none. */
	readonly sample: ModelSample | Refusal;
	/** The model, or why there is none. */
	readonly model: Model | Refusal;
	readonly estimates: Estimates | null;
	/** The test whose null is cointegration, where it can be made. */
	readonly opposite: Opposite | undefined;
	readonly replication: readonly ReplicationRow[];
	/** A check that ran before, by id. */
	readonly done: (id: string) => Check | undefined;
	/** Keeps a check for those after it. */
	readonly keep: (check: Check) => void;
}

/** A check once its data are there. */
export type ModelCheck = (context: Context, model: Model) => Check;
export type AnyCheck = (context: Context) => Check;

/** What a check found, before it becomes part of a result. */
export type Finding = Omit<Check, 'id' | 'group' | 'thresholdFrom' | 'parameters'> &
	Partial<Pick<Check, 'parameters'>> & {
		/** Names of the policy lines of this check that were read. */
		readonly lines?: readonly string[];
		/** Names of the general levels that were read. */
		readonly levels?: readonly string[];
	};

/** Makes a finding the check of that id. */
export const checkOf = (id: string, { lines = [], levels = [], parameters = {}, ...rest }: Finding): Check =>
	Object.freeze({
		id,
		group: id.slice(0, id.indexOf('.')),
		...rest,
		parameters,
		thresholdFrom: [...lines.map((line) => linePath(id, line)), ...levels.map(levelPath)]
	});

/** A check that could not be made. */
export const notAssessable = (
	id: string,
	reason: Reason,
	detail: string,
	rest: Omit<Finding, 'verdict' | 'reason' | 'detail'>
): Check => checkOf(id, { ...rest, verdict: 'not assessable', reason, detail });

/** The same from a refusal of the engine. */
export const refusedCheck = (
	id: string,
	{ refused, detail }: Refusal,
	rest: Omit<Finding, 'verdict' | 'reason' | 'detail'>
): Check => notAssessable(id, refused, detail, rest);

/** A part that could not be made. */
export const refusedPart = (about: string, { refused, detail }: Refusal): Part =>
	Object.freeze({ about, verdict: 'not assessable' as Verdict, reason: refused, detail });

/** Wraps a check that needs a model: without one it is not assessable for the model's own reason. */
export const onModel =
	(id: string, source: string, check: ModelCheck): AnyCheck =>
	(context) =>
		isRefusal(context.model) ? refusedCheck(id, context.model, { source }) : check(context, context.model);

/** Too few rows for a check: says how many there are and how many are needed. */
export const tooFew = (have: number, need: number, unit: string): Refusal | undefined =>
	have < need ? { refused: 'too-short', detail: `${have} ${unit}; at least ${need} are needed.` } : undefined;

/** A finite number, or null: results hold neither NaN nor infinity. */
export const figure = (value: number | null | undefined): number | null =>
	value !== null && value !== undefined && Number.isFinite(value) ? value : null;
