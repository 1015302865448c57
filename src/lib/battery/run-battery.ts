import { isRefusal } from '$lib/econometrics/refusal';
import type { Policy } from '$lib/domain/policy';
import { policyTier } from '$lib/domain/policy';
import { Invalid } from '$lib/domain/faults';
import type { RunRequest } from '$lib/domain/run';
import type { Check, RunResult } from '$lib/domain/run-result';
import { parseSpecification } from '$lib/domain/specification-issues';
import { familyCheck } from './checks/family';
import { replicationTolerance } from './checks/replication';
import { companionsOf } from './companions';
import type { Context } from './context';
import type { Data } from './data';
import { requestDigest, resultDigest, valueDigest } from './digest';
import { estimatesOf } from './estimates';
import { familyOf } from './family';
import { groupsOf } from './groups';
import { modelOf } from './model';
import { modelSeriesOf, seriesUsed } from './model-series';
import { oppositeOf } from './opposite';
import { familyId, registry } from './registry';
import { replicationRows } from './replication';
import { sampleOf } from './sample';
import { settingsOf, type Settings } from './settings';

/** The run was cancelled between two checks; nothing of it is kept. */
export class Cancelled extends Error {
	override readonly name = 'Cancelled';
	constructor() {
		super('The run was cancelled.');
	}
}

/** How a long computation speaks to whoever started it. */
export interface Hooks {
	/** Called before each check with how many are done, of how many, and which comes next. */
	readonly progress?: (done: number, of: number, check: string) => void;
	/** Asked between checks; true ends the run. */
	readonly cancelled?: () => boolean;
}

const levelsOf = (settings: Settings) => ({
	query: settings.number('levels/query'),
	fails: settings.number('levels/fails'),
	shown: settings.number('levels/shown')
});

/** Everything the checks look at, computed once. */
const prepare = (request: RunRequest, policy: Policy, data: Data, settings: Settings): Context => {
	const spec = request.specification;
	const sample = sampleOf(spec, data);
	const model = isRefusal(sample) ? sample : modelOf(spec, sample);
	const interval = settings.number('levels/interval');
	const done = new Map<string, Check>();
	const estimates = isRefusal(model) ? null : estimatesOf(model, interval);
	return {
		request,
		spec,
		policy,
		settings,
		levels: levelsOf(settings),
		interval,
		sample,
		model,
		estimates,
		opposite: isRefusal(sample) ? undefined : oppositeOf(spec, sample, settings),
		replication: replicationRows(spec, estimates, replicationTolerance({ settings })),
		done: (id) => done.get(id),
		keep: (check) => done.set(check.id, check)
	};
};

const runChecks = (context: Context, ids: readonly string[], hooks: Hooks): void => {
	ids.forEach((id, index) => {
		if (hooks.cancelled?.()) throw new Cancelled();
		hooks.progress?.(index, ids.length, id);
		context.keep(registry.get(id)!(context));
	});
};

/** The battery of the tier in the order of the policy, and the order in which its checks are made. */
const batteryOf = (policy: Policy, tier: number): { shown: readonly string[]; made: readonly string[] } => {
	const found = policyTier(policy, tier);
	if (!found) throw new Invalid([{ pointer: '/tier', message: `The policy has no tier ${tier}.` }]);
	const unknown = found.battery.find((id) => id !== familyId && !registry.has(id));
	if (unknown !== undefined)
		throw new Invalid([
			{ pointer: '', message: `The policy asks for ${unknown}, which this program does not know.` }
		]);
	return { shown: found.battery, made: [...registry.keys()].filter((id) => found.battery.includes(id)) };
};

/** Outcomes under the policy's own settings beside those that an override changed. */
const besideDefault = (check: Check, original: Check | undefined): Check => {
	if (!original) return check;
	const same =
		original.verdict === check.verdict &&
		original.statistic?.value === check.statistic?.value &&
		original.pValue === check.pValue;
	return same
		? check
		: Object.freeze({
				...check,
				byDefault: Object.freeze({
					verdict: original.verdict,
					statistic: original.statistic?.value ?? null,
					pValue: original.pValue ?? null
				})
			});
};

const checksOf = (context: Context, ids: readonly string[]): readonly Check[] =>
	ids.flatMap((id) => context.done(id) ?? []);

/**
 * Estimates a specification on data and makes the checks of its tier: a pure function of request, policy and data.
 *
 * @throws Invalid when the specification, a setting or the data's columns do not fit; Cancelled
 */
export const runBattery = (request: RunRequest, policy: Policy, data: Data, hooks: Hooks = {}): RunResult => {
	parseSpecification(request.specification);
	const battery = batteryOf(policy, request.tier);
	const context = prepare(request, policy, data, settingsOf(policy, request.settings));
	runChecks(context, battery.made, hooks);
	let checks = checksOf(context, battery.shown);
	if (request.settings.length > 0) {
		const plain = prepare(request, policy, data, settingsOf(policy, []));
		runChecks(plain, battery.made, hooks.cancelled ? { cancelled: hooks.cancelled } : {});
		checks = checks.map((check) => besideDefault(check, plain.done(check.id)));
	}
	const family = familyOf(checks, context.levels);
	if (battery.shown.includes(familyId)) checks = [...checks, familyCheck(family)];
	hooks.progress?.(battery.made.length, battery.made.length, '');
	const result: Omit<RunResult, 'digest'> = {
		schema: 1,
		request: headOf(request, policy),
		specification: request.specification,
		...estimatedPart(context),
		companions: companionsOf(context),
		checks,
		switchedOff: [...registry.keys(), familyId].filter((id) => !battery.shown.includes(id)),
		groups: groupsOf(policy, request.specification.estimator.kind, checks),
		replication: context.replication,
		family
	};
	return Object.freeze({ ...result, digest: resultDigest(result) });
};

const headOf = (request: RunRequest, policy: Policy): RunResult['request'] =>
	Object.freeze({
		digest: requestDigest(request),
		specification: valueDigest(request.specification),
		vintage: request.vintage,
		policy: request.policy,
		policyRelease: policy.release,
		tier: request.tier,
		settings: request.settings,
		seed: request.seed,
		purpose: request.purpose,
		engine: request.engine
	});

const estimatedPart = ({ model, sample, estimates, spec }: Context) => {
	const units = new Map(spec.series.map(({ name, unit }) => [name, unit]));
	return {
		estimates,
		...(isRefusal(model) && { refused: Object.freeze({ reason: model.refused, detail: model.detail }) }),
		series: isRefusal(sample) ? [] : seriesUsed(sample, units),
		model: isRefusal(model) ? null : modelSeriesOf(model)
	};
};
